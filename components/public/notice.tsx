import Link from 'next/link';
import type { ReactNode } from 'react';
import { Wordmark } from '../pictures/mark';
import { Sheet } from '../ui/panel';

/** One sheet in the middle of the room: sign-in, an invitation, a page that isn't there. */
export function Notice({
  title,
  children,
  action,
}: {
  title: ReactNode;
  children?: ReactNode;
  action?: ReactNode;
}) {
  return (
    <main className="mx-auto grid min-h-dvh w-full max-w-[480px] content-center gap-5 px-3 py-10">
      <Link href="/" className="justify-self-start px-1 no-underline">
        <Wordmark />
      </Link>
      <Sheet className="grid gap-4">
        <h1>{title}</h1>
        {children}
        {action ? <div className="flex flex-wrap gap-2.5">{action}</div> : null}
      </Sheet>
    </main>
  );
}
