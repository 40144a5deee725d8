import Link from 'next/link';
import { Button } from '@/components/ui/button';
import { Chip } from '@/components/ui/chip';
import { Panel, PanelHead } from '@/components/ui/panel';
import { EmptyState } from '@/components/ui/states';
import { day } from '@/lib/client/format';
import type { RunRow, UnitDetail } from '@/lib/shared/api';

export function RunsPanel({ unit, onNewRun }: { unit: UnitDetail; onNewRun: () => void }) {
  const add = unit.may.test ? (
    <Button variant="quiet" size="small" onClick={onNewRun}>
      New run
    </Button>
  ) : null;
  return (
    <Panel aria-label="Test runs">
      <PanelHead title="Test runs" aside={unit.runs.length ? add : null} />
      {unit.runs.length === 0 ? (
        <EmptyState title="No pictures yet" action={add} className="py-6">
          A test run is one sitting: three shots of the target, lit evenly and square on, are enough
          for a first grade.
        </EmptyState>
      ) : (
        <ul>
          {unit.runs.map((run) => (
            <li key={run.id} className="border-line-2 border-t first:border-0">
              <Link
                href={`/units/${unit.tag}/runs/${run.id}`}
                className="-mx-2 flex flex-wrap items-baseline justify-between gap-x-4 rounded-well px-2 py-2.5 no-underline hover:bg-sheet"
              >
                <span>
                  <b>{run.title}</b>{' '}
                  <Chip>{run.phase === 'before' ? 'before the repair' : 'after the repair'}</Chip>
                </span>
                <span className="label">
                  {shotsOf(run)} · {day(run.startedAt)}
                </span>
              </Link>
            </li>
          ))}
        </ul>
      )}
    </Panel>
  );
}

function shotsOf(run: RunRow): string {
  if (run.shots === 0) return 'no shots yet';
  const failed = run.failed ? `, ${run.failed} not measured` : '';
  return `${run.done} of ${run.shots} analysed${failed}`;
}
