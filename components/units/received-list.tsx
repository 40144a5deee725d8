import Link from 'next/link';
import { Tag } from '@/components/ui/chip';
import { EmptyState } from '@/components/ui/states';
import { age } from '@/lib/client/format';
import type { UnitRow } from '@/lib/shared/api';

/** Cameras that wait for the bench, the longest first. */
export function ReceivedList({ units, now }: { units: UnitRow[]; now: number }) {
  if (units.length === 0)
    return (
      <EmptyState title="Nothing waits for the bench" className="py-8">
        What is taken in stands here until someone begins with it.
      </EmptyState>
    );
  return (
    <ul>
      {units.map((unit) => (
        <li key={unit.tag} className="border-line-2 border-t first:border-0">
          <Link
            href={`/units/${unit.tag}`}
            data-row
            className="-mx-2 grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 rounded-well px-2 py-3 no-underline hover:bg-sheet"
          >
            <span className="min-w-0">
              <span className="font-semibold">
                {unit.maker} {unit.model}
              </span>{' '}
              <Tag className="text-ink-2">{unit.tag}</Tag>
              <span className="mt-0.5 line-clamp-2 text-[14px] text-ink-2">{unit.fault}</span>
            </span>
            <time dateTime={unit.receivedAt} className="label whitespace-nowrap pt-1">
              {age(unit.receivedAt, now)}
            </time>
          </Link>
        </li>
      ))}
    </ul>
  );
}
