import Link from 'next/link';
import type { ReactNode } from 'react';
import { Mark } from '@/components/pictures/mark';
import { Account } from '@/components/shell/account';
import { placesFor } from '@/components/shell/places';
import { Providers } from '@/components/shell/providers';
import { Rail } from '@/components/shell/rail';
import { requireActor } from '@/lib/server/session';
import { stateCounts } from '@/lib/server/units';
import { keepTheme } from './actions';

export default async function ShopLayout({ children }: { children: ReactNode }) {
  const actor = await requireActor();
  const places = placesFor(actor.role, await stateCounts(actor));
  const { name, role, shopName } = actor;
  return (
    <Providers>
      <a
        href="#main"
        className="sr-only focus:not-sr-only focus:fixed focus:top-2 focus:left-2 focus:z-50 focus:rounded-full focus:bg-ink focus:px-4 focus:py-2 focus:text-sheet"
      >
        Skip to the page
      </a>
      <div className="min-h-dvh md:grid md:grid-cols-[164px_minmax(0,1fr)]">
        <div className="flex items-center justify-between gap-2 px-3 py-2 md:sticky md:top-0 md:h-dvh md:flex-col md:items-stretch md:gap-6 md:overflow-y-auto md:px-3.5 md:py-5">
          <Link
            href="/bench"
            className="flex items-center gap-2 px-1 font-[640] no-underline font-stretch-[112%] md:hidden"
          >
            <Mark size={26} />
            Mendlight
          </Link>
          <div className="contents md:block">
            <Rail places={places} />
          </div>
          <Account actor={{ name, role, shopName }} keepTheme={keepTheme} />
        </div>
        <main
          id="main"
          className="grid max-w-[1720px] grid-cols-[minmax(0,1fr)] content-start gap-3.5 px-3 pt-2 pb-24 md:pt-[18px] md:pr-6 md:pb-10 md:pl-1.5"
        >
          {children}
        </main>
      </div>
    </Providers>
  );
}
