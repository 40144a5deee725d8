import type { ComponentProps, ReactNode } from 'react';
import { cn } from './cn';

/** A panel in the room. No border, no shadow. */
export function Panel({ className, ...rest }: ComponentProps<'section'>) {
  return <section className={cn('rounded-panel bg-panel p-5 max-sm:p-4', className)} {...rest} />;
}

/** Paper: what a buyer reads, forms that are a page of their own. */
export function Sheet({ className, ...rest }: ComponentProps<'section'>) {
  return <section className={cn('rounded-panel bg-sheet p-7 max-sm:p-5', className)} {...rest} />;
}

/** The finding as a headline, with a note or actions at its right. */
export function PanelHead({
  title,
  aside,
  className,
}: {
  title: ReactNode;
  aside?: ReactNode;
  className?: string;
}) {
  return (
    <div
      className={cn(
        'mb-3 flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1',
        className,
      )}
    >
      <h2>{title}</h2>
      {aside ? <div className="label">{aside}</div> : null}
    </div>
  );
}

/** A page's head: where we are in small words, its title, and its actions. */
export function PageHead({
  label,
  title,
  actions,
}: {
  label?: ReactNode;
  title: ReactNode;
  actions?: ReactNode;
}) {
  return (
    <header className="flex flex-wrap items-end justify-between gap-x-6 gap-y-3 px-1 py-1.5">
      <div className="min-w-0">
        {label ? <div className="label mb-1">{label}</div> : null}
        <h1>{title}</h1>
      </div>
      {actions ? <div className="flex flex-wrap items-center gap-2.5">{actions}</div> : null}
    </header>
  );
}
