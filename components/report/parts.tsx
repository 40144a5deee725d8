import type { ReactNode } from 'react';
import { cn } from '../ui/cn';

/** One sheet of the report under its finding. */
export function Section({
  id,
  title,
  lead,
  children,
  className,
}: {
  id?: string;
  title: ReactNode;
  lead?: ReactNode;
  children: ReactNode;
  className?: string;
}) {
  return (
    <section
      id={id}
      className={cn(
        'rounded-panel bg-sheet p-7 max-sm:p-5 print:rounded-none print:p-0 print:pt-3',
        className,
      )}
    >
      <h2>{title}</h2>
      {lead ? <p className="mt-1.5 max-w-[78ch] text-pretty text-ink-2">{lead}</p> : null}
      <div className="mt-4 max-sm:mt-3">{children}</div>
    </section>
  );
}

/** A small word over what it names. */
export function Fact({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div className="min-w-0">
      <dt className="label">{label}</dt>
      <dd className="mt-0.5">{children}</dd>
    </div>
  );
}

const days = new Intl.DateTimeFormat('en-GB', { dateStyle: 'long', timeZone: 'UTC' });

/** "14 March 2026", in UTC; a date of words can't be read two ways. */
export function dayInWords(iso: string): string {
  return days.format(new Date(iso));
}

/** "3 shots", "1 shot". */
export function countOf(count: number, word: string): string {
  return `${count}\u00a0${word}${count === 1 ? '' : 's'}`;
}
