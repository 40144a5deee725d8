'use client';

import { useRouter, useSearchParams } from 'next/navigation';
import { Button, ButtonLink } from '@/components/ui/button';
import { Panel } from '@/components/ui/panel';
import { EmptyState, ErrorState, LoadingLines } from '@/components/ui/states';
import { sentenceOf } from '@/lib/client/api';
import { useUnits } from '@/lib/client/queries';
import { useRowKeys } from '@/lib/client/rows';
import { useShortcuts } from '@/lib/client/shortcuts';
import { searchOf, unitQueryOf } from '@/lib/client/units-path';
import type { Page, StateCounts, UnitRow } from '@/lib/shared/api';
import type { UnitQuery } from '@/lib/shared/schemas';
import { UnitCards } from './unit-cards';
import { StateFilter, UnitSearch } from './unit-filters';
import { UnitTable } from './unit-table';

/** All units; what is asked for stands in the address, so that a view can be kept and sent. */
export function UnitList({
  first,
  firstSearch,
  counts,
}: {
  first: Page<UnitRow>;
  firstSearch: string;
  counts: StateCounts;
}) {
  const query = unitQueryOf(useSearchParams());
  const search = searchOf(query);
  const router = useRouter();
  const units = useUnits(search, search === firstSearch ? first : undefined);
  const ask = (change: Partial<UnitQuery>) => {
    const next = searchOf({ ...query, page: 1, ...change });
    window.history.replaceState(null, '', next === '' ? '/bench' : `/bench?${next}`);
  };
  useRowKeys('unit');
  useShortcuts([
    { key: 'n', label: 'Take a camera in', run: () => router.push('/arrivals#take-in') },
  ]);
  return (
    <Panel className="grid grid-cols-[minmax(0,1fr)] gap-3">
      <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2">
        <StateFilter state={query.state} counts={counts} onState={(state) => ask({ state })} />
        <UnitSearch q={query.q ?? ''} onSearch={(q) => ask({ q: q === '' ? undefined : q })} />
      </div>
      {units.isError ? (
        <ErrorState
          title="The units could not be read"
          action={<Button onClick={() => void units.refetch()}>Try again</Button>}
        >
          {sentenceOf(units.error)}
        </ErrorState>
      ) : units.data ? (
        <Found
          page={units.data}
          query={query}
          stale={units.isPlaceholderData}
          ask={ask}
          filtered={Boolean(query.q ?? query.state)}
        />
      ) : (
        <LoadingLines lines={10} />
      )}
    </Panel>
  );
}

function Found({
  page,
  query,
  stale,
  filtered,
  ask,
}: {
  page: Page<UnitRow>;
  query: UnitQuery;
  stale: boolean;
  filtered: boolean;
  ask: (change: Partial<UnitQuery>) => void;
}) {
  if (page.total === 0 && filtered)
    return (
      <EmptyState
        title="No unit answers to that"
        action={<Button onClick={() => ask({ q: undefined, state: undefined })}>Show all</Button>}
      >
        Search looks at tag, maker, model, serial number and stated fault.
      </EmptyState>
    );
  if (page.total === 0)
    return (
      <EmptyState
        title="No units yet"
        action={
          <ButtonLink href="/arrivals#take-in" variant="ink" hint="N">
            Take a camera in
          </ButtonLink>
        }
      >
        A camera begins here when it is taken in: it gets a tag, a bench log and its test runs.
      </EmptyState>
    );
  return (
    <>
      <UnitTable
        rows={page.rows}
        query={query}
        stale={stale}
        onSort={(sort, order) => ask({ sort, order })}
      />
      <UnitCards rows={page.rows} stale={stale} />
      <Pages page={page} onPage={(number) => ask({ page: number })} />
    </>
  );
}

function Pages({ page, onPage }: { page: Page<UnitRow>; onPage: (page: number) => void }) {
  const last = Math.max(1, Math.ceil(page.total / page.pageSize));
  const from = (page.page - 1) * page.pageSize + 1;
  return (
    <nav aria-label="Pages" className="flex items-center justify-between gap-3">
      <p className="label" aria-live="polite">
        {from}–{from + page.rows.length - 1} of {page.total}
      </p>
      {last > 1 ? (
        <div className="flex gap-2">
          <Button
            variant="quiet"
            size="small"
            disabled={page.page <= 1}
            onClick={() => onPage(page.page - 1)}
          >
            Back
          </Button>
          <Button
            variant="quiet"
            size="small"
            disabled={page.page >= last}
            onClick={() => onPage(page.page + 1)}
          >
            Next
          </Button>
        </div>
      ) : null}
    </nav>
  );
}
