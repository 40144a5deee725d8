import type { Metadata } from 'next';
import { InvitationForm } from '@/components/public/invitation-form';
import { Notice } from '@/components/public/notice';
import { ButtonLink } from '@/components/ui/button';
import { invitationOf } from '@/lib/server/invitations';
import { UserError } from '@/lib/shared/errors';

export const metadata: Metadata = { title: 'Invitation', referrer: 'no-referrer' };

export default async function InvitationPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  const invitation = await invitationOf(token).catch((error: unknown) => {
    if (error instanceof UserError) return error.message;
    throw error;
  });
  if (typeof invitation === 'string') {
    return (
      <Notice
        title="This invitation is closed"
        action={<ButtonLink href="/sign-in">Sign in</ButtonLink>}
      >
        <p>{invitation}</p>
      </Notice>
    );
  }
  const { shopName, email, role, hasAccount } = invitation;
  return (
    <Notice title={`Join ${shopName}`}>
      <p>
        You are invited as <b>{role}</b>; you will sign in as <b>{email}</b>.
      </p>
      <InvitationForm token={token} hasAccount={hasAccount} />
    </Notice>
  );
}
