import type { Metadata } from 'next';
import { NewPasswordForm } from '@/components/public/new-password-form';
import { Notice } from '@/components/public/notice';

export const metadata: Metadata = { title: 'New password', referrer: 'no-referrer' };

export default async function PasswordPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  return (
    <Notice title="Set a new password">
      <NewPasswordForm token={token} />
    </Notice>
  );
}
