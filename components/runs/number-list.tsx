import { ScaleLine } from '@/components/pictures/scale-line';
import { withDoubt } from '@/lib/shared/numbers';
import type { RuleOutcome } from '@/lib/shared/report';

/** Each rule's value on its scale. */
export function NumberList({ rules }: { rules: readonly RuleOutcome[] }) {
  return (
    <dl className="gap-x-10 lg:max-2xl:grid lg:max-2xl:grid-cols-2">
      {rules.map((rule) => (
        <div
          key={rule.ruleId}
          className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-3 border-line-2 border-t py-1.5 first:border-0 lg:max-2xl:nth-2:border-0 sm:grid-cols-[minmax(0,1fr)_128px_minmax(0,1fr)]"
        >
          <dt className="font-semibold text-[14px] leading-tight">{rule.label}</dt>
          <dd className="whitespace-nowrap text-[14px] tabular-nums">{ruleValue(rule)}</dd>
          <dd className="max-sm:col-span-2">
            <ScaleLine data={rule} />
          </dd>
        </div>
      ))}
    </dl>
  );
}

export const ruleValue = ({ value, expanded, unit }: RuleOutcome) =>
  value === null ? 'not tested' : withDoubt(value, expanded ?? 0, unit);
