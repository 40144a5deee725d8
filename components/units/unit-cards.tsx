import Link from 'next/link';
import { Tag } from '@/components/ui/chip';
import { cn } from '@/components/ui/cn';
import { day } from '@/lib/client/format';
import type { UnitRow } from '@/lib/shared/api';
import { StateChip } from './state-chip';
import { Thumb } from './thumb';

/** The same units on a narrow screen, one under another. */
export function UnitCards({ rows, stale = false }: { rows: UnitRow[]; stale?: boolean }) {
  return (
    <ul className={cn('grid gap-1 md:hidden', stale && 'opacity-60')}>
      {rows.map((unit) => (
        <li key={unit.tag} className="border-line-2 border-b last:border-0">
          <Link
            href={`/units/${unit.tag}`}
            data-row
            className="grid grid-cols-[72px_minmax(0,1fr)_auto] items-start gap-3 py-2.5 no-underline"
          >
            <Thumb src={unit.picture} modelClass={unit.modelClass} />
            <span className="min-w-0">
              <span className="block font-semibold leading-tight">
                {unit.maker} {unit.model}
              </span>
              <Tag className="text-ink-2">{unit.tag}</Tag>
              <span className="mt-0.5 line-clamp-2 text-[13.5px] text-ink-2">{unit.fault}</span>
            </span>
            <span className="grid justify-items-end gap-1">
              <StateChip state={unit.state} />
              {unit.grade ? <span className="font-[680] text-[19px]">{unit.grade}</span> : null}
              <time dateTime={unit.changedAt} className="label">
                {day(unit.changedAt)}
              </time>
            </span>
          </Link>
        </li>
      ))}
    </ul>
  );
}
