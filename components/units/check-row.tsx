'use client';

import type { KeyboardEvent, Ref } from 'react';
import { cn } from '@/components/ui/cn';
import { controlClass } from '@/components/ui/field';
import type { UnitDetail } from '@/lib/shared/api';
import type { CheckOutcome } from '@/lib/shared/words';

const outcomes: { value: CheckOutcome; word: string }[] = [
  { value: 'pass', word: 'Pass' },
  { value: 'fail', word: 'Fail' },
  { value: 'not-fitted', word: 'Not fitted' },
];

export function CheckRow({
  ref,
  label,
  check,
  outcome,
  editable,
  first,
  failing,
  onKeyDown,
  onMark,
  onFail,
  onLeave,
}: {
  ref: Ref<HTMLLIElement>;
  label: string;
  check: UnitDetail['checks'][number] | null;
  outcome: CheckOutcome | null;
  editable: boolean;
  first: boolean;
  /** Asks what fails before it is recorded. */
  failing: boolean;
  onKeyDown: (event: KeyboardEvent<HTMLLIElement>) => void;
  onMark: (outcome: CheckOutcome) => void;
  onFail: (note: string | undefined) => void;
  onLeave: () => void;
}) {
  const word = outcomes.find(({ value }) => value === outcome)?.word ?? 'Not checked';
  return (
    <li
      ref={ref}
      tabIndex={editable ? (first ? 0 : -1) : undefined}
      aria-label={`${label}: ${word}`}
      onKeyDown={editable ? onKeyDown : undefined}
      className="border-line-2 border-t py-1.5 first:border-0 focus-visible:rounded-well"
    >
      <div className="flex min-h-9 items-center justify-between gap-3">
        <span className="flex min-w-0 items-center gap-2.5 leading-tight">
          <OutcomeDisc outcome={outcome} />
          {label}
        </span>
        {editable ? (
          <span className="flex shrink-0">
            {outcomes.map(({ value, word: text }) => (
              <button
                key={value}
                type="button"
                aria-pressed={outcome === value}
                onClick={() => onMark(value)}
                className={cn(
                  'min-h-8 rounded-full px-2.5 text-[13px] focus-visible:rounded-full',
                  outcome === value
                    ? value === 'fail'
                      ? 'bg-light font-semibold text-light-on'
                      : 'bg-ink font-semibold text-sheet'
                    : 'text-ink-2 hover:text-ink',
                )}
              >
                {text}
              </button>
            ))}
          </span>
        ) : (
          <span className="text-[14px] text-ink-2">{word}</span>
        )}
      </div>
      {failing ? <FailNote label={label} onFail={onFail} onLeave={onLeave} /> : null}
      {!failing && check?.note ? (
        <p className="pl-6.5 text-[13.5px] text-ink-2">{check.note}</p>
      ) : null}
    </li>
  );
}

function FailNote({
  label,
  onFail,
  onLeave,
}: {
  label: string;
  onFail: (note: string | undefined) => void;
  onLeave: () => void;
}) {
  return (
    <input
      ref={(element) => element?.focus()}
      aria-label={`${label}: what fails?`}
      placeholder="What fails? Enter records it, Escape leaves it"
      maxLength={300}
      className={cn(controlClass, 'mt-1 mb-1')}
      onKeyDown={(event) => {
        if (event.key === 'Escape') onLeave();
        if (event.key !== 'Enter') return;
        event.preventDefault();
        const note = event.currentTarget.value.trim();
        onFail(note === '' ? undefined : note);
      }}
    />
  );
}

/** Full disc: passes. Safelight ring: fails. Dotted ring: not tried. Dash: not fitted. */
function OutcomeDisc({ outcome }: { outcome: CheckOutcome | null }) {
  return (
    <svg viewBox="-9 -9 18 18" width={16} height={16} aria-hidden="true" className="shrink-0">
      {outcome === 'pass' ? (
        <circle r={7} fill="var(--ink)" />
      ) : outcome === 'fail' ? (
        <circle r={5.75} fill="none" stroke="var(--light)" strokeWidth={2.5} />
      ) : outcome === 'not-fitted' ? (
        <path d="M-5 0H5" stroke="var(--ink-3)" strokeWidth={2} />
      ) : (
        <circle r={6} fill="none" stroke="var(--edge)" strokeWidth={1.5} strokeDasharray="2 2.4" />
      )}
    </svg>
  );
}
