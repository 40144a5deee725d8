import { quantities } from '@/analysis/quantities';
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
          className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-3 border-line-2 border-t py-1.5 first:border-0 lg:max-2xl:nth-2:border-0 sm:grid-cols-[minmax(0,1fr)_136px_minmax(0,1fr)]"
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

/** A rule on function checks counts those that failed. */
export function ruleValue({ value, expanded, unit, quantity }: RuleOutcome): string {
  if (value === null) return 'not tested';
  if (quantities.has(quantity)) return withDoubt(value, expanded ?? 0, unit);
  return value === 0 ? 'none fails' : `${value} ${value === 1 ? 'fails' : 'fail'}`;
}
