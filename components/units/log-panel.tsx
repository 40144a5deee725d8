'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Chip } from '@/components/ui/chip';
import { cn } from '@/components/ui/cn';
import { Panel, PanelHead } from '@/components/ui/panel';
import { EmptyState } from '@/components/ui/states';
import { bookedTime, money } from '@/lib/client/format';
import type { LogEntryView, UnitDetail } from '@/lib/shared/api';
import { logKindWords } from '@/lib/shared/words';
import { LogForm } from './log-form';
import { Moment } from './moment';

/** What was seen and done, the newest last as in a book; entries are amended, never edited. */
export function LogPanel({ unit, currency }: { unit: UnitDetail; currency: string }) {
  const [amends, setAmends] = useState<LogEntryView | null>(null);
  const amended = new Set(unit.log.map((entry) => entry.amends));
  return (
    <Panel aria-label="Bench log">
      <PanelHead
        title="Bench log"
        aside={`${bookedTime(unit.minutes)} · ${money(unit.spentMinor, currency)} with its price`}
      />
      {unit.log.length === 0 ? (
        <EmptyState title="The log is empty" className="py-6">
          Begin with the symptom: what does it do, or not do? Then each check, what was seen, and
          what that rules in or out.
        </EmptyState>
      ) : (
        <ol className="mb-4">
          {unit.log.map((entry) => (
            <Entry
              key={entry.id}
              entry={entry}
              amended={amended.has(entry.id)}
              currency={currency}
              onAmend={unit.may.log ? () => setAmends(entry) : undefined}
            />
          ))}
        </ol>
      )}
      {unit.may.log ? (
        <LogForm
          tag={unit.tag}
          currency={currency}
          amends={amends}
          onOver={() => setAmends(null)}
        />
      ) : (
        <p className="label">The log is closed while the unit stands where it does.</p>
      )}
    </Panel>
  );
}

function Entry({
  entry,
  amended,
  currency,
  onAmend,
}: {
  entry: LogEntryView;
  amended: boolean;
  currency: string;
  onAmend: (() => void) | undefined;
}) {
  return (
    <li className="group grid gap-x-4 gap-y-1 border-line-2 border-t py-3 first:border-0 sm:grid-cols-[104px_minmax(0,1fr)]">
      <div>
        <Chip tone={entry.kind === 'finding' || entry.kind === 'part' ? 'on' : 'plain'}>
          {logKindWords[entry.kind]}
        </Chip>
      </div>
      <div className="min-w-0">
        <p className={cn('whitespace-pre-wrap text-pretty', amended && 'text-ink-3 line-through')}>
          {entry.text}
        </p>
        <p className="label mt-1 flex flex-wrap items-center gap-x-3">
          <Moment at={entry.at} />
          <span>{entry.by}</span>
          {entry.minutes ? <span>{bookedTime(entry.minutes)}</span> : null}
          {entry.costMinor ? <span>{money(entry.costMinor, currency)}</span> : null}
          {entry.amends ? <span>amends an earlier entry</span> : null}
          {amended ? <span>amended below</span> : null}
          {onAmend && !amended ? (
            <Button
              variant="bare"
              size="small"
              className="min-h-6 py-0 text-[12.5px] focus-visible:opacity-100 group-hover:opacity-100 md:opacity-0"
              onClick={onAmend}
            >
              Amend
            </Button>
          ) : null}
        </p>
      </div>
    </li>
  );
}
