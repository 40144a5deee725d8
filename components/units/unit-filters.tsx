'use client';

import { useEffect, useRef, useState } from 'react';
import { cn } from '@/components/ui/cn';
import { controlClass } from '@/components/ui/field';
import { Key } from '@/components/ui/key';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { StateCounts } from '@/lib/shared/api';
import type { UnitQuery } from '@/lib/shared/schemas';
import { type UnitState, unitStates, unitStateWords } from '@/lib/shared/words';

/** Typing pauses this long before the server is asked. */
const pause = 250;

export function UnitSearch({ q, onSearch }: { q: string; onSearch: (q: string) => void }) {
  const [typed, setTyped] = useState(q);
  const input = useRef<HTMLInputElement>(null);
  const latest = useRef(onSearch);
  latest.current = onSearch;
  useShortcuts([{ key: '/', label: 'Search', run: () => input.current?.focus() }]);
  useEffect(() => setTyped(q), [q]);
  useEffect(() => {
    if (typed.trim() === q) return;
    const timer = setTimeout(() => latest.current(typed.trim()), pause);
    return () => clearTimeout(timer);
  }, [typed, q]);
  return (
    <search className="relative w-full sm:w-72">
      <input
        ref={input}
        type="search"
        aria-label="Search tag, model, serial or fault"
        aria-keyshortcuts="/"
        placeholder="Tag, model, serial or fault"
        value={typed}
        onChange={(event) => setTyped(event.target.value)}
        onKeyDown={(event) => event.key === 'Escape' && input.current?.blur()}
        className={cn(controlClass, 'rounded-full pr-9 focus-visible:rounded-full')}
      />
      <Key aria-hidden="true" className="-translate-y-1/2 absolute top-1/2 right-3.5">
        /
      </Key>
    </search>
  );
}

export function StateFilter({
  state,
  counts,
  onState,
}: {
  state: UnitQuery['state'];
  counts: StateCounts;
  onState: (state: UnitState | undefined) => void;
}) {
  const all = unitStates.reduce((sum, name) => sum + counts[name], 0);
  const shown = unitStates.filter((name) => counts[name] > 0 || name === state);
  return (
    <fieldset className="-mx-1 flex min-w-0 max-w-[calc(100%+8px)] gap-1 overflow-x-auto px-1 py-1 md:flex-wrap">
      <legend className="sr-only">State</legend>
      <FilterButton on={!state} label="All" count={all} onClick={() => onState(undefined)} />
      {shown.map((name) => (
        <FilterButton
          key={name}
          on={state === name}
          label={unitStateWords[name]}
          count={counts[name]}
          onClick={() => onState(name)}
        />
      ))}
    </fieldset>
  );
}

function FilterButton({
  on,
  label,
  count,
  onClick,
}: {
  on: boolean;
  label: string;
  count: number;
  onClick: () => void;
}) {
  return (
    <button
      type="button"
      aria-pressed={on}
      onClick={onClick}
      className={cn(
        'min-h-8 shrink-0 whitespace-nowrap rounded-full px-3 text-[13.5px] focus-visible:rounded-full',
        on ? 'bg-ink font-semibold text-sheet' : 'text-ink-2 hover:text-ink',
      )}
    >
      {label} <span className="opacity-70">{count}</span>
    </button>
  );
}
