'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { Controller, useForm } from 'react-hook-form';
import { z } from 'zod';
import { Button } from '@/components/ui/button';
import { Actions, Dialog } from '@/components/ui/dialog';
import { FormError, Input, Textarea } from '@/components/ui/field';
import { useToast } from '@/components/ui/toast';
import { call, sentenceOf } from '@/lib/client/api';
import { amountText, parseMoney } from '@/lib/client/format';
import { useChange } from '@/lib/client/queries';
import type { UnitDetail } from '@/lib/shared/api';
import { unitPatchSchema } from '@/lib/shared/schemas';
import { ChipInput, usualAccessories } from './chip-input';

/** The patch with its amount as typed; an emptied box says that nothing is known. */
function factsSchema(currency: string) {
  return unitPatchSchema
    .omit({ priceMinor: true })
    .required({ fault: true, serial: true, accessories: true })
    .extend({
      price: z
        .string()
        .refine((typed) => !Number.isNaN(parseMoney(typed, currency)), 'Enter an amount.'),
    });
}
type Facts = z.output<ReturnType<typeof factsSchema>>;

/** Puts right what was written down when the unit came in. */
export function FactsDialog({ unit, currency }: { unit: UnitDetail; currency: string }) {
  const [open, setOpen] = useState(false);
  return (
    <Dialog
      title={`Change ${unit.tag}`}
      description="As it came in. Maker and model stay: a wrong one is scrapped and taken in anew."
      open={open}
      onOpenChange={setOpen}
      wide
      trigger={
        <Button variant="bare" size="small">
          Change…
        </Button>
      }
    >
      <FactsForm unit={unit} currency={currency} onSaved={() => setOpen(false)} />
    </Dialog>
  );
}

function FactsForm({
  unit,
  currency,
  onSaved,
}: {
  unit: UnitDetail;
  currency: string;
  onSaved: () => void;
}) {
  const say = useToast();
  const { register, control, handleSubmit, formState } = useForm<Facts>({
    resolver: zodResolver(factsSchema(currency)),
    defaultValues: {
      fault: unit.fault,
      serial: unit.serial,
      source: unit.source ?? '',
      condition: unit.condition ?? '',
      accessories: unit.accessories,
      price: unit.priceMinor === null ? '' : amountText(unit.priceMinor, currency),
    },
  });
  const { errors } = formState;
  const save = useChange(
    ({ price, source, condition, ...rest }: Facts) =>
      call<UnitDetail>(`/api/units/${unit.tag}`, 'PATCH', {
        ...rest,
        source: source || null,
        condition: condition || null,
        priceMinor: parseMoney(price, currency) ?? null,
      }),
    ['unit', 'units'],
  );
  const submit = handleSubmit((facts) =>
    save.mutate(facts, {
      onSuccess: () => {
        say(`${unit.tag} is changed.`);
        onSaved();
      },
    }),
  );
  return (
    <form onSubmit={submit} noValidate className="grid gap-4 sm:grid-cols-2">
      <Textarea
        label="Stated fault"
        rows={2}
        fieldClass="sm:col-span-2"
        error={errors.fault?.message}
        {...register('fault')}
      />
      <Input
        label="Serial number"
        autoComplete="off"
        className="font-mono"
        error={errors.serial?.message}
        {...register('serial')}
      />
      <Input
        label={`Price paid, ${currency}`}
        note="optional"
        inputMode="decimal"
        error={errors.price?.message}
        {...register('price')}
      />
      <Input
        label="Where from"
        note="optional"
        fieldClass="sm:col-span-2"
        error={errors.source?.message}
        {...register('source')}
      />
      <div className="sm:col-span-2">
        <Controller
          control={control}
          name="accessories"
          render={({ field }) => (
            <ChipInput
              label="What came with it"
              suggestions={usualAccessories}
              value={field.value}
              onChange={field.onChange}
            />
          )}
        />
      </div>
      <Textarea
        label="Condition"
        note="optional"
        rows={2}
        fieldClass="sm:col-span-2"
        error={errors.condition?.message}
        {...register('condition')}
      />
      <div className="grid gap-3 sm:col-span-2">
        <FormError>{save.isError ? sentenceOf(save.error) : null}</FormError>
        <Actions>
          <Button type="submit" busy={save.isPending}>
            Save
          </Button>
        </Actions>
      </div>
    </form>
  );
}
