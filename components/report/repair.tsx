import type { ReportContent } from '@/lib/shared/report';
import type { CheckOutcome } from '@/lib/shared/words';
import { type Shown, StateDisc } from '../pictures/state-disc';
import { isMeasured } from './measured';
import { Section } from './parts';

/** What was wrong, what was done, and what the hand can operate. */
export function Repair({ content }: { content: ReportContent }) {
  return (
    <div className="grid items-stretch gap-4 sm:grid-cols-2 md:grid-cols-[minmax(0,1fr)_minmax(0,1.45fr)] print:gap-8">
      <RepairSummary content={content} />
      <Checks content={content} />
    </div>
  );
}

function RepairSummary({ content: { repair, unit } }: { content: ReportContent }) {
  return (
    <Section title="What was mended" className="h-full">
      <h3>Fault as it came in</h3>
      <p className="text-ink-2">{repair.fault}</p>
      {repair.work.length ? (
        <>
          <h3 className="mt-4 print:mt-2">Work</h3>
          <ol className="text-ink-2">
            {repair.work.map((work) => (
              <li key={work} className="mt-1">
                {work}
              </li>
            ))}
          </ol>
        </>
      ) : null}
      <h3 className="mt-4 print:mt-2">Parts</h3>
      {repair.parts.length ? (
        <ul className="text-ink-2">
          {repair.parts.map((part) => (
            <li key={part}>{part}</li>
          ))}
        </ul>
      ) : (
        <p className="text-ink-2">None were fitted.</p>
      )}
      <h3 className="mt-4 print:mt-2">Comes with</h3>
      <p className="text-ink-2">
        {unit.accessories.length ? unit.accessories.join(', ') : 'the camera alone'}
      </p>
    </Section>
  );
}

const outcomeWords: Record<CheckOutcome, string> = {
  pass: 'works',
  fail: 'does not work',
  'not-fitted': 'not fitted',
};
const outcomeStanding: Record<CheckOutcome, Shown> = {
  pass: 'within',
  fail: 'outside',
  'not-fitted': 'untested',
};
/** What a buyer must know stands first. */
const order: CheckOutcome[] = ['fail', 'pass', 'not-fitted'];

function Checks({ content: { checks, rules } }: { content: ReportContent }) {
  const failed = checks.filter(({ outcome }) => outcome === 'fail').length;
  const tried = checks.filter(({ outcome }) => outcome !== 'not-fitted').length;
  const sorted = order.flatMap((outcome) => checks.filter((check) => check.outcome === outcome));
  const title =
    checks.length === 0
      ? 'Function checks'
      : failed
        ? `${failed} of ${tried} functions ${failed === 1 ? 'does' : 'do'} not work`
        : 'Everything that was tried works';
  const untold = rules.filter((rule) => !isMeasured(rule) && rule.standing !== 'within');
  return (
    <Section title={title} className="h-full">
      {checks.length === 0 ? <p className="text-ink-2">No checks are on record.</p> : null}
      <ul className="-mt-1.5 gap-x-6 md:columns-2 print:columns-2">
        {sorted.map(({ label, outcome, note }) => (
          <li
            key={label}
            className="grid break-inside-avoid grid-cols-[18px_1fr] gap-2.5 border-line-2 border-t py-1.5 max-md:first:border-0 print:border-0 print:py-0"
          >
            <StateDisc standing={outcomeStanding[outcome]} size={14} className="mt-1" />
            <span className="min-w-0">
              {label} <span className="text-ink-2">{outcomeWords[outcome]}</span>
              {note ? <span className="text-ink-2">; {note}</span> : null}
            </span>
          </li>
        ))}
      </ul>
      {untold.map((rule) => (
        <p key={rule.ruleId} className="mt-3 text-[13.5px] text-ink-2">
          {rule.sentence}
        </p>
      ))}
    </Section>
  );
}
