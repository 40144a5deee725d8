'use client';

import { type SortingState, useTable } from '@tanstack/react-table';
import { useRouter } from 'next/navigation';
import { useMemo } from 'react';
import { cn } from '@/components/ui/cn';
import { Table, Td, Th } from '@/components/ui/table';
import type { UnitRow } from '@/lib/shared/api';
import type { UnitQuery } from '@/lib/shared/schemas';
import { unitColumns, unitFeatures } from './unit-columns';

/** Units as rows: a head sorts, a row opens. Sorting is the server's; this says what was asked for. */
export function UnitTable({
  rows,
  query,
  onSort,
  stale,
}: {
  rows: UnitRow[];
  query: UnitQuery;
  onSort: (sort: UnitQuery['sort'], order: UnitQuery['order']) => void;
  stale: boolean;
}) {
  const router = useRouter();
  // The table compares its state by identity: a new array on every render would set it off again without end.
  const sorting = useMemo<SortingState>(
    () => [{ id: query.sort, desc: query.order === 'desc' }],
    [query.sort, query.order],
  );
  const table = useTable({
    features: unitFeatures,
    columns: unitColumns,
    data: rows,
    getRowId: (row) => row.tag,
    manualSorting: true,
    enableSortingRemoval: false,
    state: { sorting },
    onSortingChange: (updater) => {
      const [next] = typeof updater === 'function' ? updater(sorting) : updater;
      if (next) onSort(next.id as UnitQuery['sort'], next.desc ? 'desc' : 'asc');
    },
  });
  return (
    <Table className={cn('transition-opacity max-md:hidden', stale && 'opacity-60')}>
      <caption className="sr-only">Units</caption>
      <thead>
        {table.getHeaderGroups().map((group) => (
          <tr key={group.id}>
            {group.headers.map((header) => {
              const sorted = header.column.getIsSorted();
              return (
                <Th
                  key={header.id}
                  aria-sort={sorted ? (sorted === 'asc' ? 'ascending' : 'descending') : undefined}
                >
                  {header.column.getCanSort() ? (
                    <button
                      type="button"
                      className="inline-flex min-h-6 items-center gap-1 hover:text-ink"
                      onClick={header.column.getToggleSortingHandler()}
                    >
                      <table.FlexRender header={header} />
                      <SortMark sorted={sorted} />
                    </button>
                  ) : (
                    <span className="inline-flex min-h-6 items-center">
                      <table.FlexRender header={header} />
                    </span>
                  )}
                </Th>
              );
            })}
          </tr>
        ))}
      </thead>
      <tbody>
        {table.getRowModel().rows.map((row) => (
          <tr
            key={row.id}
            className="cursor-pointer hover:bg-sheet has-focus-visible:bg-sheet"
            onClick={() => router.push(`/units/${row.original.tag}`)}
          >
            {row.getAllCells().map((cell) => (
              <Td key={cell.id}>
                <table.FlexRender cell={cell} />
              </Td>
            ))}
          </tr>
        ))}
      </tbody>
    </Table>
  );
}

function SortMark({ sorted }: { sorted: false | 'asc' | 'desc' }) {
  return (
    <span aria-hidden="true" className={cn('w-2.5', sorted ? 'text-ink' : 'opacity-0')}>
      {sorted === 'asc' ? '↑' : '↓'}
    </span>
  );
}
