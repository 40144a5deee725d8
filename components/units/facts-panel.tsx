import type { ReactNode } from 'react';
import { Tag } from '@/components/ui/chip';
import { Panel, PanelHead } from '@/components/ui/panel';
import { bookedTime, day, money } from '@/lib/client/format';
import type { UnitDetail } from '@/lib/shared/api';
import { modelClassWords } from '@/lib/shared/words';
import { FactsDialog } from './facts-dialog';

/** What the unit is and how it came; one line a fact, nothing that isn't known. */
export function FactsPanel({ unit, currency }: { unit: UnitDetail; currency: string }) {
  const facts: [string, ReactNode][] = [
    ['Stated fault', unit.fault],
    ['Condition', unit.condition],
    ['Came with', unit.accessories.length ? unit.accessories.join(', ') : null],
    ['Serial', <Tag key="serial">{unit.serial}</Tag>],
    ['Class', modelClassWords[unit.modelClass]],
    ['From', unit.source],
    ['Price paid', unit.priceMinor === null ? null : money(unit.priceMinor, currency)],
    ['Spent so far', money(unit.spentMinor, currency)],
    ['Time booked', unit.minutes ? bookedTime(unit.minutes) : null],
    ['Taken in', `${day(unit.receivedAt)} by ${unit.receivedBy}`],
  ];
  return (
    <Panel aria-label="The unit">
      <PanelHead
        title="The unit"
        aside={unit.may.edit ? <FactsDialog unit={unit} currency={currency} /> : undefined}
      />
      <dl className="grid gap-x-4 gap-y-2 sm:grid-cols-[104px_minmax(0,1fr)]">
        {facts
          .filter(([, value]) => value)
          .map(([label, value]) => (
            <div key={label} className="contents max-sm:block">
              <dt className="label pt-[3px]">{label}</dt>
              <dd className="min-w-0 whitespace-pre-wrap">{value}</dd>
            </div>
          ))}
      </dl>
    </Panel>
  );
}
