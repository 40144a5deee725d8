import { quantities } from '@/analysis/quantities';
import { withDoubt } from '@/lib/shared/numbers';
import type { ReportContent, ReportMeasurement, RuleOutcome } from '@/lib/shared/report';
import { ScaleLine } from '../pictures/scale-line';
import { StateDisc, standingWords } from '../pictures/state-disc';
import { Section } from './parts';

/** Rules on their scales first, then every other number. */
export function Measured({ content }: { content: ReportContent }) {
  const rules = content.rules.filter(isMeasured);
  const shown = new Set(rules.map((rule) => keyOf(rule.quantity, rule.zone)));
  const others = content.measurements.filter(({ name, zone }) => !shown.has(keyOf(name, zone)));
  return (
    <Section
      id="measured"
      title="What was measured"
      lead="The disc is the result, the bar its doubt, the small strokes other cameras of this model. Letters mark where each grade ends."
    >
      {rules.map((rule) => (
        <Rule key={rule.ruleId} rule={rule} text={textOf(rule, content.measurements)} />
      ))}
      {others.length ? <Others measurements={others} /> : null}
      <p className="mt-4 text-[13.5px] text-ink-2">
        Doubt is the expanded uncertainty: the true value lies within it in about 95 of 100 such
        tests (JCGM 100). A grade is given only where the result lies clearly within its limit (JCGM
        106). Rules: {content.grade.schemeName}, version {content.grade.schemeVersion}.
      </p>
    </Section>
  );
}

/** Function checks are judged by rules too, but have no scale. */
export const isMeasured = (rule: RuleOutcome) => quantities.has(rule.quantity);

const keyOf = (name: string, zone: string | null) => `${name} ${zone ?? ''}`;

function textOf(rule: RuleOutcome, measurements: ReportMeasurement[]): string {
  if (rule.value === null) return 'not tested';
  const same = measurements.find(
    ({ name, zone, value }) => name === rule.quantity && zone === rule.zone && value === rule.value,
  );
  const decimals = quantities.get(rule.quantity)?.decimals ?? 2;
  return same?.text ?? withDoubt(rule.value, rule.expanded ?? 0, rule.unit, decimals);
}

function Rule({ rule, text }: { rule: RuleOutcome; text: string }) {
  const source = quantities.get(rule.quantity)?.source;
  return (
    <div className="grid break-inside-avoid grid-cols-[1fr_auto] items-center gap-x-3.5 gap-y-1 border-line-2 border-t py-2 sm:grid-cols-[210px_150px_1fr] print:py-0.5">
      <div className="min-w-0">
        <b>{rule.label}</b>
        <span className="block text-[12.5px] text-ink-3">
          {source ? `following ${source}` : null}
          {rule.n > 1 ? `, ${rule.n} shots` : null}
        </span>
      </div>
      <div className="text-right sm:text-left">
        <span className="whitespace-nowrap font-[640]">{text}</span>
        <span className="flex items-center gap-1.5 text-[12.5px] text-ink-3 max-sm:justify-end">
          <StateDisc standing={rule.standing} size={11} />
          {standingWords[rule.standing]}
        </span>
      </div>
      <div className="max-sm:col-span-2">
        <ScaleLine data={rule} />
      </div>
    </div>
  );
}

function Others({ measurements }: { measurements: ReportMeasurement[] }) {
  return (
    <div className="mt-6 print:mt-2">
      <h3>Measured as well</h3>
      <dl className="mt-2 gap-x-8 sm:columns-2 print:columns-3 print:text-[13px] [&>div]:flex [&>div]:break-inside-avoid [&>div]:items-baseline [&>div]:justify-between [&>div]:gap-4 [&>div]:border-line-2 [&>div]:border-t [&>div]:py-1.5 [&_dd]:whitespace-nowrap [&_dd]:font-[560] [&_i]:whitespace-nowrap [&_i]:text-[12.5px] [&_i]:text-ink-3 [&_i]:not-italic print:[&>div]:py-0.5 print:[&_i]:hidden">
        {measurements.map(({ name, zone, label, source, text }) => (
          <div key={`${label} ${name} ${zone ?? ''} ${text}`}>
            <dt className="min-w-0">
              {label} <i>{source}</i>
            </dt>
            <dd>{text}</dd>
          </div>
        ))}
      </dl>
    </div>
  );
}
