import type { Metadata } from 'next';
import { ForgottenForm } from '@/components/public/forgotten-form';
import { Notice } from '@/components/public/notice';

export const metadata: Metadata = { title: 'Forgotten password' };

export default function ForgottenPage() {
  return (
    <Notice title="Forgotten password">
      <ForgottenForm />
    </Notice>
  );
}
