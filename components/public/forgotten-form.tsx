'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { call, sentenceOf } from '@/lib/client/api';
import { forgottenSchema } from '@/lib/shared/schemas';
import { Button, ButtonLink } from '../ui/button';
import { FormError, Input } from '../ui/field';

export function ForgottenForm() {
  const [sentTo, setSentTo] = useState<string | null>(null);
  const {
    register,
    handleSubmit,
    setError,
    formState: { errors, isSubmitting },
  } = useForm({ resolver: zodResolver(forgottenSchema), defaultValues: { email: '' } });
  const submit = handleSubmit(async (values) => {
    try {
      await call('/api/password/forgotten', 'POST', values);
      setSentTo(values.email);
    } catch (error) {
      setError('root', { message: sentenceOf(error) });
    }
  });
  if (sentTo) {
    return (
      <div role="status" className="grid justify-items-start gap-4">
        <p>
          If <b>{sentTo}</b> belongs to someone here, a letter with a link is on its way to it. The
          link sets a new password once.
        </p>
        <ButtonLink href="/sign-in">Back to sign-in</ButtonLink>
      </div>
    );
  }
  return (
    <form onSubmit={submit} noValidate className="grid gap-4">
      <p>Enter the address you sign in with, and we send you a link that sets a new password.</p>
      <Input
        label="E-mail address"
        type="email"
        autoComplete="username"
        error={errors.email?.message}
        {...register('email')}
      />
      <FormError>{errors.root?.message}</FormError>
      <Button type="submit" busy={isSubmitting}>
        Send the link
      </Button>
    </form>
  );
}
