'use client';

import Link from 'next/link';
import { StateDisc } from '@/components/pictures/state-disc';
import { Tag } from '@/components/ui/chip';
import { Panel } from '@/components/ui/panel';
import { EmptyState } from '@/components/ui/states';
import { Thumb } from '@/components/units/thumb';
import { age } from '@/lib/client/format';
import { useGradingQueue } from '@/lib/client/queries';
import { useRowKeys } from '@/lib/client/rows';
import type { GradingRow } from '@/lib/shared/api';

/** What awaits a second pair of eyes, the longest first. */
export function GradingQueue({ first, now }: { first: GradingRow[]; now: number }) {
  const queue = useGradingQueue(first);
  useRowKeys('unit');
  return (
    <Panel aria-label="Awaiting a grade">
      {queue.length === 0 ? (
        <EmptyState title="Nothing awaits a grade">
          A refurbisher sends a unit here when its test run is measured. What is open now stands on
          the{' '}
          <Link
            className="underline decoration-line underline-offset-3 hover:decoration-current"
            href="/bench?state=testing"
          >
            bench, in testing
          </Link>
          .
        </EmptyState>
      ) : (
        <ul>
          {queue.map((row) => (
            <li key={row.tag} className="border-line-2 border-t first:border-0">
              <QueueRow row={row} now={now} />
            </li>
          ))}
        </ul>
      )}
    </Panel>
  );
}

function QueueRow({ row, now }: { row: GradingRow; now: number }) {
  const { proposal } = row;
  return (
    <Link
      href={`/grading/${row.tag}`}
      data-row
      className="-mx-2 grid grid-cols-[64px_minmax(0,1fr)_auto] items-center gap-x-4 rounded-well px-2 py-3 no-underline hover:bg-sheet md:grid-cols-[80px_minmax(0,1fr)_minmax(0,1.2fr)_110px_56px]"
    >
      <Thumb src={row.picture} modelClass={row.modelClass} />
      <span className="min-w-0">
        <span className="block font-semibold">
          {row.maker} {row.model}
        </span>
        <Tag className="text-ink-2">{row.tag}</Tag>
        <span className="mt-0.5 line-clamp-2 text-[13.5px] text-ink-2">{row.fault}</span>
      </span>
      <span className="text-[14px] text-pretty text-ink-2 max-md:hidden">
        {proposal?.sentence ?? 'Nothing was measured.'}
        {proposal?.inDoubt ? (
          <span className="mt-0.5 flex items-center gap-1.5">
            <StateDisc standing="doubt" size={13} />
            {proposal.inDoubt} in doubt
          </span>
        ) : null}
      </span>
      <span className="label max-md:hidden">
        {age(row.sentAt, now)} ago
        <br />
        by {row.sentBy}
        {row.maySign ? null : (
          <>
            <br />
            not for you to sign
          </>
        )}
      </span>
      <span className="text-right font-[680] text-[26px] leading-none">
        {proposal?.letter ?? '–'}
        <span className="sr-only"> proposed</span>
      </span>
    </Link>
  );
}
