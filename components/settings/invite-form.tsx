'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { FormError, Input, Select } from '@/components/ui/field';
import { useToast } from '@/components/ui/toast';
import { ApiError, call, sentenceOf } from '@/lib/client/api';
import { showProblem } from '@/lib/client/forms';
import { useChange } from '@/lib/client/queries';
import type { InvitationRow } from '@/lib/shared/api';
import { inviteSchema } from '@/lib/shared/schemas';
import { roles } from '@/lib/shared/words';

type Invitation = z.output<typeof inviteSchema>;

export function InviteForm() {
  const say = useToast();
  const { register, handleSubmit, formState, reset, setError } = useForm<Invitation>({
    resolver: zodResolver(inviteSchema),
    defaultValues: { email: '', role: 'refurbisher' },
  });
  const invite = useChange(
    (input: Invitation) => call<InvitationRow>('/api/invitations', 'POST', input),
    ['people'],
  );
  const submit = handleSubmit(async (input) => {
    try {
      await invite.mutateAsync(input);
      say(`A mail is on its way to ${input.email}.`);
      reset();
    } catch (error) {
      if (error instanceof ApiError) showProblem(error, setError);
    }
  });
  return (
    <form onSubmit={submit} noValidate className="mt-2 grid gap-3 border-line border-t pt-4">
      <div className="flex flex-wrap items-start gap-3">
        <Input
          label="Invite by e-mail"
          type="email"
          autoComplete="off"
          fieldClass="min-w-56 flex-1"
          error={formState.errors.email?.message}
          {...register('email')}
        />
        <Select label="as" {...register('role')}>
          {roles.map((role) => (
            <option key={role}>{role}</option>
          ))}
        </Select>
      </div>
      <FormError>{invite.isError ? sentenceOf(invite.error) : null}</FormError>
      <div>
        <Button type="submit" variant="quiet" busy={invite.isPending}>
          Invite
        </Button>
      </div>
    </form>
  );
}
