import type { PublicReport, ReportContent } from '@/lib/shared/report';
import { Wordmark } from '../pictures/mark';
import { Capture, Checking } from './checking';
import { ColourAndTone } from './colour';
import { Hero } from './hero';
import { Measured } from './measured';
import { dayInWords } from './parts';
import { Points } from './points';
import { Repair } from './repair';
import { Sharpness } from './sharpness';

/** The live facts beside the frozen content. */
export type ReportStanding = Pick<PublicReport, 'sha256' | 'withdrawn' | 'versions'>;

/** Everything a buyer reads, from the frozen content alone. Runs without JavaScript. */
export function ReportPage({
  content,
  standing,
}: {
  content: ReportContent;
  standing: ReportStanding;
}) {
  const base = `/r/${content.slug}`;
  return (
    <div className="mx-auto max-w-report px-6 pt-7 pb-14 max-sm:px-3 max-sm:pt-4 print:max-w-none print:p-0">
      <header className="flex items-center justify-between gap-4 px-1 pb-5 max-sm:pb-3 print:pb-2">
        <span className="flex flex-wrap items-center gap-x-2.5">
          <Wordmark size={30} />
          <span className="text-ink-2 max-[400px]:hidden">test report</span>
        </span>
        <a
          href="#check"
          className="inline-flex min-h-10 items-center whitespace-nowrap rounded-full px-[18px] font-semibold max-sm:px-3.5 max-sm:text-[14px] no-underline shadow-[inset_0_0_0_1.5px_var(--line)] hover:shadow-[inset_0_0_0_1.5px_var(--ink)] focus-visible:rounded-full print:hidden"
        >
          Check this report
        </a>
        <span className="mono hidden print:block">{base}</span>
      </header>
      <main className="grid gap-4 print:gap-3">
        {standing.withdrawn ? <Withdrawn {...standing.withdrawn} /> : null}
        <Hero content={content} />
        <Points good={content.good} weak={content.weak} />
        <Sharpness content={content} base={base} />
        <Measured content={content} />
        <Repair content={content} />
        <ColourAndTone content={content} />
        <Capture content={content} base={base} />
        <Checking content={content} standing={standing} base={base} />
      </main>
      <footer className="label px-1 pt-6 print:pt-2">
        Published by {content.shop.name} with Mendlight. The shop answers for this report.
      </footer>
    </div>
  );
}

function Withdrawn({ at, reason }: { at: string; reason: string }) {
  return (
    <section className="rounded-panel border-[2.5px] border-light bg-light-soft p-6">
      <h2>This report was withdrawn on {dayInWords(at)}</h2>
      <p className="mt-1.5 max-w-[78ch]">
        {reason} It no longer vouches for the camera; it stays readable so that nobody is left with
        a copy that looks valid.
      </p>
    </section>
  );
}
