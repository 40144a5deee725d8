'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useEffect } from 'react';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { FormError, Input, Textarea } from '@/components/ui/field';
import { Key } from '@/components/ui/key';
import { ApiError, call, sentenceOf } from '@/lib/client/api';
import { parseMoney } from '@/lib/client/format';
import { optionalWhole, showProblem } from '@/lib/client/forms';
import { useChange } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { LogEntryView } from '@/lib/shared/api';
import { logEntrySchema } from '@/lib/shared/schemas';
import { type LogKind, logKinds, logKindWords } from '@/lib/shared/words';

const keys: Record<LogKind, string> = {
  symptom: 's',
  check: 'c',
  finding: 'w',
  action: 'a',
  part: 'f',
  note: 'e',
};
type Typed = z.input<typeof logEntrySchema>;
type Output = z.output<typeof logEntrySchema>;

/** An entry in a few presses: a key chooses its kind and goes to the text, Ctrl + Enter writes it down. */
export function LogForm({
  tag,
  currency,
  amends,
  onOver,
}: {
  tag: string;
  currency: string;
  amends: LogEntryView | null;
  onOver: () => void;
}) {
  const form = useForm<Typed, unknown, Output>({
    resolver: zodResolver(logEntrySchema),
    defaultValues: { kind: 'check', text: '' },
  });
  const { register, formState, setFocus, setValue, setError, reset } = form;
  const { errors } = formState;
  const add = useChange(
    (entry: Output) => call<LogEntryView>(`/api/units/${tag}/log`, 'POST', entry),
    ['unit'],
  );
  const choose = (kind: LogKind) => {
    setValue('kind', kind);
    setFocus('text');
  };
  useShortcuts(
    logKinds.map((kind) => ({
      key: keys[kind],
      label: `Log: ${logKindWords[kind].toLowerCase()}`,
      run: () => choose(kind),
    })),
  );
  useEffect(() => {
    if (!amends) return;
    reset({ kind: amends.kind, text: amends.text });
    setFocus('text');
  }, [amends, reset, setFocus]);
  const over = (kind: LogKind) => {
    reset({ kind, text: '' });
    onOver();
  };
  const submit = form.handleSubmit(async (entry) => {
    try {
      await add.mutateAsync(amends ? { ...entry, amends: amends.id } : entry);
      over(entry.kind);
      setFocus('text');
    } catch (error) {
      if (error instanceof ApiError) showProblem(error, setError);
    }
  });
  return (
    <form onSubmit={submit} noValidate className="grid gap-3 border-line border-t pt-4">
      <fieldset className="flex flex-wrap gap-1.5">
        <legend className="sr-only">Kind of entry</legend>
        {logKinds.map((kind) => (
          <label
            key={kind}
            className="inline-flex min-h-8 items-center gap-1.5 rounded-full px-3 text-[13.5px] has-checked:bg-ink has-checked:font-semibold has-checked:text-sheet has-focus-visible:outline-[2.5px] has-focus-visible:outline-ink"
          >
            <input type="radio" value={kind} className="sr-only" {...register('kind')} />
            {logKindWords[kind]}
            <Key aria-hidden="true">{keys[kind].toUpperCase()}</Key>
          </label>
        ))}
      </fieldset>
      <Textarea
        label={amends ? 'As it should read' : 'What happened'}
        rows={3}
        error={errors.text?.message}
        {...register('text')}
        onKeyDown={(event) => {
          if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) void submit();
          if (event.key === 'Escape') event.currentTarget.blur();
        }}
      />
      <div className="flex flex-wrap items-end gap-3">
        <Input
          label="Minutes"
          inputMode="numeric"
          fieldClass="w-24"
          error={errors.minutes?.message}
          {...register('minutes', { setValueAs: optionalWhole })}
        />
        <Input
          label={`Cost, ${currency}`}
          inputMode="decimal"
          fieldClass="w-28"
          error={errors.costMinor?.message}
          {...register('costMinor', {
            setValueAs: (typed: unknown) =>
              typeof typed === 'string' ? parseMoney(typed, currency) : typed,
          })}
        />
        <div className="ml-auto flex items-center gap-2.5">
          {amends ? (
            <Button variant="quiet" onClick={() => over('check')}>
              Leave it
            </Button>
          ) : null}
          <Button
            type="submit"
            variant="quiet"
            busy={add.isPending}
            hint="Ctrl ↵"
            aria-keyshortcuts="Control+Enter"
          >
            {amends ? 'Amend' : 'Write down'}
          </Button>
        </div>
      </div>
      <FormError>{add.isError ? sentenceOf(add.error) : null}</FormError>
    </form>
  );
}
