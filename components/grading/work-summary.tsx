import { Panel, PanelHead } from '@/components/ui/panel';
import { bookedTime, day } from '@/lib/client/format';
import type { UnitDetail } from '@/lib/shared/api';
import { logKindWords } from '@/lib/shared/words';

/** What the bench says was wrong and done: amended entries are left out. */
export function WorkSummary({ unit }: { unit: UnitDetail }) {
  const amended = new Set(unit.log.map((entry) => entry.amends));
  const entries = unit.log.filter((entry) => !amended.has(entry.id));
  const people = [...new Set(entries.map((entry) => entry.by))].join(', ');
  return (
    <Panel aria-label="Bench work">
      <PanelHead
        title={entries.length === 0 ? 'The bench log is empty' : 'What was done'}
        aside={entries.length ? `${people} · ${bookedTime(unit.minutes)}` : undefined}
      />
      <p className="mb-2">
        <b>Came as:</b> {unit.fault}
      </p>
      <ol className="grid gap-1.5">
        {entries.map((entry) => (
          <li key={entry.id} className="grid gap-x-3 sm:grid-cols-[104px_minmax(0,1fr)]">
            <span className="label pt-[3px]">{logKindWords[entry.kind]}</span>
            <span className="text-pretty">
              {entry.text} <span className="label whitespace-nowrap">{day(entry.at)}</span>
            </span>
          </li>
        ))}
      </ol>
    </Panel>
  );
}
