import Image from 'next/image';
import { cn } from '@/components/ui/cn';

/** A photograph on the 18 % well, or the empty well where there is none yet. */
export function Thumb({
  src,
  alt = '',
  className,
}: {
  src: string | null;
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
        <span className="grid size-full place-items-center">
          <span className="size-1/3 max-w-5 rounded-full border-2 border-[#a8a8a8] border-dotted [aspect-ratio:1]" />
        </span>
      )}
    </span>
  );
}
