'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useRouter } from 'next/navigation';
import { Controller, useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { FormError, Input, Select, Textarea } from '@/components/ui/field';
import { ApiError, call, sentenceOf } from '@/lib/client/api';
import { parseMoney } from '@/lib/client/format';
import { optionalText, showProblem } from '@/lib/client/forms';
import { useChange } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { UnitDetail } from '@/lib/shared/api';
import { type UnitInput, unitInputSchema } from '@/lib/shared/schemas';
import { type ModelClass, modelClasses, modelClassWords } from '@/lib/shared/words';
import { ChipInput, usualAccessories } from './chip-input';

export interface KnownModel {
  maker: string;
  model: string;
  modelClass: ModelClass;
}
type UnitOutput = z.output<typeof unitInputSchema>;

/** Takes a camera in. What was typed stays when the server says no. */
export function TakeInForm({ models, currency }: { models: KnownModel[]; currency: string }) {
  const router = useRouter();
  const form = useForm<UnitInput, unknown, UnitOutput>({
    resolver: zodResolver(unitInputSchema),
    defaultValues: { modelClass: 'small-sensor-compact', accessories: [] },
  });
  const { register, formState, setError, setFocus, setValue, getValues } = form;
  const { errors } = formState;
  const takeIn = useChange(
    (input: UnitOutput) => call<UnitDetail>('/api/units', 'POST', input),
    ['units'],
  );
  useShortcuts([{ key: 'n', label: 'Take a camera in', run: () => setFocus('maker') }]);
  const submit = form.handleSubmit(async (input) => {
    try {
      const unit = await takeIn.mutateAsync(input);
      router.push(`/units/${unit.tag}`);
      router.refresh();
    } catch (error) {
      if (error instanceof ApiError) showProblem(error, setError);
    }
  });
  const recognise = () => {
    const { maker, model } = getValues();
    const known = models.find((m) => m.maker === maker?.trim() && m.model === model?.trim());
    if (known) setValue('modelClass', known.modelClass);
  };
  const makers = [...new Set(models.map((m) => m.maker))];
  return (
    <form onSubmit={submit} noValidate className="grid gap-4 sm:grid-cols-2">
      <Input
        label="Maker"
        list="makers"
        autoComplete="off"
        error={errors.maker?.message}
        {...register('maker', { onBlur: recognise })}
      />
      <Input
        label="Model"
        list="models"
        autoComplete="off"
        error={errors.model?.message}
        {...register('model', { onBlur: recognise })}
      />
      <datalist id="makers">
        {makers.map((maker) => (
          <option key={maker} value={maker} />
        ))}
      </datalist>
      <datalist id="models">
        {models.map((m) => (
          <option key={`${m.maker} ${m.model}`} value={m.model} label={m.maker} />
        ))}
      </datalist>
      <Select label="Class" error={errors.modelClass?.message} {...register('modelClass')}>
        {modelClasses.map((name) => (
          <option key={name} value={name}>
            {modelClassWords[name]}
          </option>
        ))}
      </Select>
      <Input
        label="Serial number"
        autoComplete="off"
        error={errors.serial?.message}
        className="font-mono"
        {...register('serial')}
      />
      <Textarea
        label="Stated fault"
        hint="In the seller’s words: what does it do, or not do?"
        rows={3}
        fieldClass="sm:col-span-2"
        error={errors.fault?.message}
        {...register('fault')}
      />
      <Input
        label="Where from"
        note="optional"
        error={errors.source?.message}
        {...register('source', { setValueAs: optionalText })}
      />
      <Input
        label={`Price paid, ${currency}`}
        note="optional"
        inputMode="decimal"
        placeholder="0.00"
        error={errors.priceMinor?.message}
        {...register('priceMinor', {
          setValueAs: (typed: unknown) =>
            typeof typed === 'string' ? parseMoney(typed, currency) : typed,
        })}
      />
      <div className="sm:col-span-2">
        <Controller
          control={form.control}
          name="accessories"
          render={({ field }) => (
            <ChipInput
              label="What came with it"
              suggestions={usualAccessories}
              value={field.value ?? []}
              onChange={field.onChange}
            />
          )}
        />
      </div>
      <Textarea
        label="Condition"
        note="optional"
        hint="Marks, dents, missing screws, signs of water."
        rows={2}
        fieldClass="sm:col-span-2"
        error={errors.condition?.message}
        {...register('condition', { setValueAs: optionalText })}
      />
      <div className="grid gap-3 sm:col-span-2">
        <FormError>{takeIn.isError ? sentenceOf(takeIn.error) : null}</FormError>
        <div>
          <Button type="submit" size="bench" busy={takeIn.isPending || takeIn.isSuccess}>
            Take it in
          </Button>
        </div>
      </div>
    </form>
  );
}
