import Image from 'next/image';
import { UnitGlyph } from '@/components/pictures/unit-glyph';
import { cn } from '@/components/ui/cn';
import type { ModelClass } from '@/lib/shared/words';

/** A photograph on the 18 % well, or a drawing of such a camera where there is none yet. */
export function Thumb({
  src,
  modelClass,
  alt = '',
  className,
}: {
  src: string | null;
  modelClass: ModelClass;
  alt?: string;
  className?: string;
}) {
  return (
    <span className={cn('block aspect-4/3 overflow-hidden rounded-well bg-well', className)}>
      {src ? (
        <Image
          src={src}
          alt={alt}
          width={320}
          height={240}
          unoptimized
          className="size-full object-cover"
        />
      ) : (
        <span className="grid size-full place-items-center text-[#d2d2d2]">
          <UnitGlyph modelClass={modelClass} size={30} />
        </span>
      )}
    </span>
  );
}
