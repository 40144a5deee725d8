import { ScaleLine } from '@/components/pictures/scale-line';
import { StateDisc, standingWords } from '@/components/pictures/state-disc';
import { ruleValue } from '@/components/runs/number-list';
import { doubtSentence } from '@/lib/shared/findings';
import { numberText, withUnit } from '@/lib/shared/numbers';
import type { RuleOutcome } from '@/lib/shared/report';

const rank = { outside: 0, doubt: 1, untested: 2, within: 3 };

/** Every rule with its value, limits, margin and reason; what holds the grade down comes first. */
export function RuleList({ rules }: { rules: readonly RuleOutcome[] }) {
  const sorted = rules.toSorted((a, b) => rank[a.standing] - rank[b.standing]);
  return (
    <ol>
      {sorted.map((rule) => (
        <li
          key={rule.ruleId}
          className="grid gap-x-4 gap-y-1 border-line-2 border-t py-3 first:border-0 md:grid-cols-[18px_minmax(0,1fr)_minmax(0,1fr)]"
        >
          <StateDisc standing={rule.standing} className="mt-0.5 max-md:hidden" />
          <div className="min-w-0">
            <h3 className="flex items-center gap-2">
              <StateDisc standing={rule.standing} className="md:hidden" />
              {rule.label}
            </h3>
            <p className="text-[14px] text-pretty text-ink-2">{rule.sentence}</p>
            {rule.standing === 'doubt' && rule.moreShots ? (
              <p className="text-[14px] text-pretty text-ink-2">{doubtSentence(rule)}</p>
            ) : null}
          </div>
          <div className="min-w-0">
            <b className="block tabular-nums">{ruleValue(rule)}</b>
            <span className="label block">{verdictOf(rule)}</span>
            <ScaleLine data={rule} />
          </div>
        </li>
      ))}
    </ol>
  );
}

/** "clearly within, allows A, 0.12 EV to spare". */
function verdictOf({ standing, allows, margin, unit, effect }: RuleOutcome): string {
  const allowed = allows === 'Parts' ? 'parts only' : `allows ${allows}`;
  const spare =
    margin !== null && margin > 0
      ? `${withUnit(numberText(margin, marginDecimals(margin)), unit)} to spare`
      : null;
  const bars = effect === 'bar' && allows === 'Parts' ? 'bars the sale' : null;
  return [standingWords[standing], allowed, bars, spare].filter(Boolean).join(', ');
}

const marginDecimals = (margin: number) => (margin >= 10 ? 0 : margin >= 1 ? 1 : 2);
