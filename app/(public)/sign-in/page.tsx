import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { DemoPeople } from '@/components/public/demo-people';
import { Notice } from '@/components/public/notice';
import { SignInForm } from '@/components/public/sign-in-form';
import { env } from '@/lib/server/env';
import { currentActor } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Sign in' };

export default async function SignInPage({
  searchParams,
}: {
  searchParams: Promise<{ callbackUrl?: string; done?: string }>;
}) {
  const { callbackUrl, done } = await searchParams;
  const next = ownPath(callbackUrl);
  if (await currentActor()) redirect(next);
  return (
    <Notice title="Sign in">
      {done === 'password' ? <p>Your new password is set. Sign in with it.</p> : null}
      {done === 'invitation' ? <p>You have joined the shop. Sign in to begin.</p> : null}
      <SignInForm next={next} />
      {env().LOCAL_MODE ? <DemoPeople /> : null}
    </Notice>
  );
}

/** Where to go afterwards: only ever a path of this site, never an address from a link. */
function ownPath(callbackUrl: string | undefined): string {
  if (!callbackUrl) return '/bench';
  const { APP_URL } = env();
  const url = URL.canParse(callbackUrl, APP_URL) ? new URL(callbackUrl, APP_URL) : null;
  return url?.origin === new URL(APP_URL).origin ? url.pathname + url.search : '/bench';
}
