'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useRouter } from 'next/navigation';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { Choice, FormError, Input } from '@/components/ui/field';
import { Panel, PanelHead } from '@/components/ui/panel';
import { useToast } from '@/components/ui/toast';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import { shopSettingsSchema } from '@/lib/shared/schemas';

type Settings = z.output<typeof shopSettingsSchema>;

export function ShopPanel({ name, signOwnWork }: { name: string; signOwnWork: boolean }) {
  const router = useRouter();
  const say = useToast();
  const { register, handleSubmit, formState, reset } = useForm<Settings>({
    resolver: zodResolver(shopSettingsSchema),
    defaultValues: { name, signOwnWork },
  });
  const save = useChange((input: Settings) => call<Settings>('/api/shop', 'PATCH', input), []);
  const submit = handleSubmit((input) =>
    save.mutate(input, {
      onSuccess: () => {
        reset(input);
        say('The shop’s settings are saved.');
        router.refresh();
      },
    }),
  );
  return (
    <Panel aria-label="Shop">
      <PanelHead title="The shop" />
      <form onSubmit={submit} noValidate className="grid gap-4">
        <Input
          label="Name"
          hint="Buyers read it on every report."
          error={formState.errors.name?.message}
          {...register('name')}
        />
        <div className="grid gap-1.5">
          <div>
            <Choice
              type="checkbox"
              label="Let people sign their own bench work"
              {...register('signOwnWork')}
            />
          </div>
          <p className="text-[13.5px] text-ink-2">
            For a shop of one. Every report signed that way says so.
          </p>
        </div>
        <FormError>{save.isError ? sentenceOf(save.error) : null}</FormError>
        <div>
          <Button type="submit" disabled={!formState.isDirty} busy={save.isPending}>
            Save
          </Button>
        </div>
      </form>
    </Panel>
  );
}
