import { createColumnHelper, rowSortingFeature, tableFeatures } from '@tanstack/react-table';
import Link from 'next/link';
import { Tag } from '@/components/ui/chip';
import { day } from '@/lib/client/format';
import type { UnitRow } from '@/lib/shared/api';
import { StateChip } from './state-chip';
import { Thumb } from './thumb';

/** Sorted and paged by the server; the table only keeps which column leads. */
export const unitFeatures = tableFeatures({ rowSortingFeature });
const helper = createColumnHelper<typeof unitFeatures, UnitRow>();

export const unitColumns = helper.columns([
  helper.display({
    id: 'picture',
    header: () => <span className="sr-only">Picture</span>,
    cell: ({ row }) => (
      <Thumb src={row.original.picture} modelClass={row.original.modelClass} className="w-16" />
    ),
    enableSorting: false,
  }),
  helper.accessor('tag', {
    header: 'Tag',
    cell: ({ row }) => (
      <Link href={`/units/${row.original.tag}`} data-row className="font-semibold no-underline">
        <Tag>{row.original.tag}</Tag>
      </Link>
    ),
  }),
  helper.accessor('model', {
    header: 'Model',
    cell: ({ row }) => (
      <>
        <span className="font-semibold">{row.original.model}</span>
        <span className="block text-[13px] text-ink-2">{row.original.maker}</span>
      </>
    ),
  }),
  helper.accessor('state', {
    header: 'State',
    cell: ({ row }) => <StateChip state={row.original.state} />,
  }),
  helper.accessor('grade', {
    header: 'Grade',
    cell: ({ row }) => (
      <span className="font-[680] text-[17px]">
        {row.original.grade ?? <span className="font-normal text-ink-3">–</span>}
      </span>
    ),
  }),
  helper.accessor('fault', {
    header: 'Stated fault',
    cell: ({ row }) => <span className="line-clamp-2 max-w-[44ch]">{row.original.fault}</span>,
    enableSorting: false,
  }),
  helper.accessor('changedAt', {
    id: 'changed',
    header: 'Changed',
    cell: ({ row }) => (
      <time dateTime={row.original.changedAt} className="whitespace-nowrap text-ink-2">
        {day(row.original.changedAt)}
      </time>
    ),
  }),
]);
