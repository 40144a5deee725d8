import { Panel, PanelHead } from '@/components/ui/panel';
import type { UnitDetail } from '@/lib/shared/api';
import { unitStateWords } from '@/lib/shared/words';
import { Moment } from './moment';

/** Where the unit has been, the newest first. */
export function Timeline({ changes }: { changes: UnitDetail['changes'] }) {
  const newestFirst = changes.toReversed();
  return (
    <Panel aria-label="Timeline">
      <PanelHead title="Timeline" />
      <ol className="grid gap-2.5">
        {newestFirst.map((change, i) => (
          <li
            key={`${change.at}${change.to}`}
            className="grid grid-cols-[16px_minmax(0,1fr)] gap-2.5"
          >
            <svg viewBox="-9 -9 18 18" width={14} height={14} aria-hidden="true" className="mt-1">
              {i === 0 ? (
                <circle r={7} fill="var(--ink)" />
              ) : (
                <circle r={6} fill="none" stroke="var(--edge)" strokeWidth={2} />
              )}
            </svg>
            <div>
              <b>{unitStateWords[change.to]}</b>
              <span className="label block">
                <Moment at={change.at} /> · {change.by}
              </span>
              {change.note ? <p className="text-[14px] text-ink-2">{change.note}</p> : null}
            </div>
          </li>
        ))}
      </ol>
    </Panel>
  );
}
