'use client';

import Link from 'next/link';
import { usePathname, useRouter } from 'next/navigation';
import { Mark } from '@/components/pictures/mark';
import { cn } from '@/components/ui/cn';
import { useShortcuts } from '@/lib/client/shortcuts';
import { isHere, type Place } from './places';

/** The rail at the left of a wide screen; a bar at the foot of a phone. */
export function Rail({ places }: { places: Place[] }) {
  const path = usePathname();
  const router = useRouter();
  useShortcuts(
    places.map((place) => ({
      key: place.key,
      label: `Go to ${place.label}`,
      run: () => router.push(place.href),
    })),
  );
  return (
    <>
      <Link
        href="/bench"
        className="flex items-center gap-[9px] px-2 pb-4 font-[640] no-underline font-stretch-[112%] max-md:hidden"
      >
        <Mark size={30} />
        Mendlight
      </Link>
      <nav
        aria-label="Places"
        className="max-md:fixed max-md:inset-x-0 max-md:bottom-0 max-md:z-30 max-md:bg-surround max-md:px-2 max-md:pt-1.5 max-md:pb-[max(8px,env(safe-area-inset-bottom))]"
      >
        <ul className="flex gap-[3px] max-md:justify-between md:flex-col">
          {places.map((place) => (
            <li key={place.href} className="max-md:min-w-0 max-md:flex-1">
              <RailLink place={place} here={isHere(path, place.href)} />
            </li>
          ))}
        </ul>
      </nav>
    </>
  );
}

function RailLink({ place, here }: { place: Place; here: boolean }) {
  return (
    <Link
      href={place.href}
      aria-current={here ? 'page' : undefined}
      aria-keyshortcuts={place.key}
      className={cn(
        'flex min-h-9 items-center justify-between gap-2 rounded-full px-3 font-[540] text-ink-2 no-underline focus-visible:rounded-full',
        'max-md:min-h-12 max-md:flex-col max-md:justify-center max-md:gap-0 max-md:px-1 max-md:text-[12.5px]',
        here ? 'bg-ink text-sheet' : 'hover:text-ink',
      )}
    >
      <span>{place.label}</span>
      {place.count ? (
        <span className="opacity-70 tabular-nums max-md:text-[11.5px] max-md:leading-none">
          {place.count}
          <span className="sr-only"> waiting</span>
        </span>
      ) : null}
    </Link>
  );
}
