'use client';

import { zodResolver } from '@hookform/resolvers/zod';
import Link from 'next/link';
import { signIn } from 'next-auth/react';
import { useForm } from 'react-hook-form';
import { signInSchema } from '@/lib/shared/schemas';
import { Button } from '../ui/button';
import { FormError, Input } from '../ui/field';

const away = 'The server did not answer. Check the connection and try again.';

export function SignInForm({ next }: { next: string }) {
  const {
    register,
    handleSubmit,
    setError,
    formState: { errors, isSubmitting, isSubmitSuccessful },
  } = useForm({ resolver: zodResolver(signInSchema), defaultValues: { email: '', password: '' } });
  const submit = handleSubmit(async (values) => {
    const answer = await signIn('credentials', { ...values, redirect: false }).catch(() => null);
    if (answer?.ok && !answer.error) {
      // A whole page load: the shop's rooms must be read anew as this person.
      window.location.assign(next);
      return;
    }
    setError('root', { message: answer?.error ?? away });
  });
  return (
    <form method="post" onSubmit={submit} noValidate className="grid gap-4">
      <Input
        label="E-mail address"
        type="email"
        autoComplete="username"
        autoFocus
        error={errors.email?.message}
        {...register('email')}
      />
      <Input
        label="Password"
        type="password"
        autoComplete="current-password"
        note={
          <Link href="/forgotten" className="-my-1 inline-block py-1 underline underline-offset-2">
            Forgotten?
          </Link>
        }
        error={errors.password?.message}
        {...register('password')}
      />
      <FormError>{errors.root?.message}</FormError>
      <Button type="submit" busy={isSubmitting || isSubmitSuccessful}>
        Sign in
      </Button>
    </form>
  );
}
