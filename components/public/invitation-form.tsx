'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { ApiError, call, sentenceOf } from '@/lib/client/api';
import { showProblem } from '@/lib/client/forms';
import { acceptInvitationSchema } from '@/lib/shared/schemas';
import { Button } from '../ui/button';
import { FormError, Input } from '../ui/field';

export function InvitationForm({ token, hasAccount }: { token: string; hasAccount: boolean }) {
  const {
    register,
    handleSubmit,
    setError,
    formState: { errors, isSubmitting, isSubmitSuccessful },
  } = useForm({
    resolver: zodResolver(acceptInvitationSchema),
    defaultValues: { name: '', password: '' },
  });
  const submit = handleSubmit(async (values) => {
    try {
      await call(`/api/invitations/${encodeURIComponent(token)}`, 'POST', values);
      window.location.assign('/sign-in?done=invitation');
    } catch (error) {
      if (error instanceof ApiError) showProblem(error, setError);
      setError('root', { message: sentenceOf(error) });
    }
  });
  return (
    <form method="post" onSubmit={submit} noValidate className="grid gap-4">
      <Input
        label="Your name"
        autoComplete="name"
        error={errors.name?.message}
        {...register('name')}
      />
      <Input
        label={hasAccount ? 'Your password' : 'Choose a password'}
        hint={
          hasAccount
            ? 'You have an account already: the one you use there.'
            : 'At least 10 characters.'
        }
        type="password"
        autoComplete={hasAccount ? 'current-password' : 'new-password'}
        error={errors.password?.message}
        {...register('password')}
      />
      <FormError>{errors.root?.message}</FormError>
      <Button type="submit" busy={isSubmitting || isSubmitSuccessful}>
        Join
      </Button>
    </form>
  );
}
