'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { call, sentenceOf } from '@/lib/client/api';
import { newPasswordSchema } from '@/lib/shared/schemas';
import { Button } from '../ui/button';
import { FormError, Input } from '../ui/field';

export function NewPasswordForm({ token }: { token: string }) {
  const {
    register,
    handleSubmit,
    setError,
    formState: { errors, isSubmitting, isSubmitSuccessful },
  } = useForm({ resolver: zodResolver(newPasswordSchema), defaultValues: { password: '' } });
  const submit = handleSubmit(async (values) => {
    try {
      await call(`/api/password/${encodeURIComponent(token)}`, 'POST', values);
      window.location.assign('/sign-in?done=password');
    } catch (error) {
      setError('root', { message: sentenceOf(error) });
    }
  });
  return (
    <form method="post" onSubmit={submit} noValidate className="grid gap-4">
      <Input
        label="New password"
        hint="At least 10 characters. Signs you out everywhere else."
        type="password"
        autoComplete="new-password"
        error={errors.password?.message}
        {...register('password')}
      />
      <FormError>{errors.root?.message}</FormError>
      <Button type="submit" busy={isSubmitting || isSubmitSuccessful}>
        Set the password
      </Button>
    </form>
  );
}
