import type { ReactNode } from 'react';
import { Mark } from '../pictures/mark';
import { cn } from './cn';

/** An empty page teaches the next step. */
export function EmptyState({
  title,
  children,
  action,
  className,
}: {
  title: ReactNode;
  children?: ReactNode;
  action?: ReactNode;
  className?: string;
}) {
  return (
    <div className={cn('grid justify-items-center gap-3 px-4 py-12 text-center', className)}>
      <Mark size={44} className="text-edge" />
      <h2>{title}</h2>
      {children ? <div className="max-w-[46ch] text-ink-2">{children}</div> : null}
      {action ? <div className="mt-2 flex flex-wrap justify-center gap-2.5">{action}</div> : null}
    </div>
  );
}

/** Something went wrong: what, and what to do. */
export function ErrorState({
  title,
  children,
  action,
}: {
  title: ReactNode;
  children?: ReactNode;
  action?: ReactNode;
}) {
  return (
    <div role="alert" className="grid justify-items-start gap-2 rounded-panel bg-light-soft p-5">
      <h2>{title}</h2>
      {children ? <div className="max-w-text">{children}</div> : null}
      {action ? <div className="mt-2 flex flex-wrap gap-2.5">{action}</div> : null}
    </div>
  );
}

/** Takes the place of what is coming, at its size, so that nothing jumps. */
export function LoadingLines({ lines = 3, label = 'Loading' }: { lines?: number; label?: string }) {
  const widths = ['w-11/12', 'w-3/4', 'w-5/6', 'w-2/3'];
  return (
    <div role="status" className="grid motion-safe:animate-pulse gap-3.5 py-1">
      <span className="sr-only">{label}</span>
      {Array.from({ length: lines }, (_, line) => line).map((line) => (
        <span
          key={line}
          aria-hidden="true"
          className={cn('h-3.5 rounded-full bg-line', widths[line % widths.length])}
        />
      ))}
    </div>
  );
}

/** For readers of the screen only. */
export function Hidden({ children }: { children: ReactNode }) {
  return <span className="sr-only">{children}</span>;
}
