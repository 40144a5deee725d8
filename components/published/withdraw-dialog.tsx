'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { Actions, Dialog } from '@/components/ui/dialog';
import { FormError, Textarea } from '@/components/ui/field';
import { useToast } from '@/components/ui/toast';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import type { ReportRow } from '@/lib/shared/api';
import { withdrawSchema } from '@/lib/shared/schemas';

type Reason = z.output<typeof withdrawSchema>;

/** Takes back what a report says. The address stays and tells whoever opens it why. */
export function WithdrawDialog({ report }: { report: ReportRow }) {
  const router = useRouter();
  const say = useToast();
  const [open, setOpen] = useState(false);
  const { register, handleSubmit, formState } = useForm<Reason>({
    resolver: zodResolver(withdrawSchema),
    defaultValues: { reason: '' },
  });
  const withdraw = useChange(
    (input: Reason) => call(`/api/reports/${report.slug}/withdraw`, 'POST', input),
    ['reports', 'unit', 'units'],
  );
  const submit = handleSubmit((input) =>
    withdraw.mutate(input, {
      onSuccess: () => {
        setOpen(false);
        say(`The report of ${report.tag} is withdrawn.`);
        router.refresh();
      },
    }),
  );
  return (
    <Dialog
      title={`Withdraw the report of ${report.tag}`}
      description="Whoever opens its address then reads that it no longer stands, and why."
      open={open}
      onOpenChange={setOpen}
      trigger={
        <Button variant="quiet" size="small">
          Withdraw…
        </Button>
      }
    >
      <form onSubmit={submit} noValidate className="grid gap-4">
        <Textarea
          label="Why it no longer stands"
          rows={3}
          error={formState.errors.reason?.message}
          {...register('reason')}
        />
        <FormError>{withdraw.isError ? sentenceOf(withdraw.error) : null}</FormError>
        <Actions>
          <Button type="submit" variant="light" busy={withdraw.isPending}>
            Withdraw it
          </Button>
        </Actions>
      </form>
    </Dialog>
  );
}
