'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useRouter } from 'next/navigation';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { Actions, Dialog } from '@/components/ui/dialog';
import { Choice, FormError, Input } from '@/components/ui/field';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import type { UnitDetail } from '@/lib/shared/api';
import { runInputSchema } from '@/lib/shared/schemas';

type RunInput = z.output<typeof runInputSchema>;

/** Starts a run. The form comes into being as the dialog opens, so it offers what suits the unit as it stands then. */
export function NewRunDialog({
  unit,
  open,
  onOpenChange,
}: {
  unit: UnitDetail;
  open: boolean;
  onOpenChange: (open: boolean) => void;
}) {
  return (
    <Dialog
      title="New test run"
      description="One sitting of shots, all taken alike."
      open={open}
      onOpenChange={onOpenChange}
    >
      <NewRunForm unit={unit} />
    </Dialog>
  );
}

/** A run after the repair also moves a unit from the bench to testing, because that is what it means. */
function NewRunForm({ unit }: { unit: UnitDetail }) {
  const router = useRouter();
  const phase = unit.state === 'received' ? 'before' : 'after';
  const { register, handleSubmit, formState } = useForm<RunInput>({
    resolver: zodResolver(runInputSchema),
    defaultValues: { title: phase === 'before' ? 'As it came' : 'After the repair', phase },
  });
  const start = useChange(
    async (input: RunInput) => {
      const run = await call<{ id: string }>(`/api/units/${unit.tag}/runs`, 'POST', input);
      if (input.phase === 'after' && unit.may.moveTo.includes('testing'))
        await call(`/api/units/${unit.tag}/state`, 'POST', { to: 'testing' });
      return run;
    },
    ['unit', 'units'],
  );
  const submit = handleSubmit((input) =>
    start.mutate(input, {
      onSuccess: ({ id }) => router.push(`/units/${unit.tag}/runs/${id}`),
    }),
  );
  return (
    <form onSubmit={submit} noValidate className="grid gap-4">
      <Input label="Title" error={formState.errors.title?.message} {...register('title')} />
      <fieldset className="flex flex-wrap gap-2">
        <legend className="mb-1.5 font-semibold text-[14px]">Taken</legend>
        <Choice label="before the repair" value="before" {...register('phase')} />
        <Choice label="after the repair" value="after" {...register('phase')} />
      </fieldset>
      <FormError>{start.isError ? sentenceOf(start.error) : null}</FormError>
      <Actions>
        <Button type="submit" busy={start.isPending || start.isSuccess}>
          Start the run
        </Button>
      </Actions>
    </form>
  );
}
