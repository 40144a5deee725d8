import type { Metadata } from 'next';
import { ReportList } from '@/components/published/report-list';
import { PageHead } from '@/components/ui/panel';
import { may } from '@/lib/server/access';
import { listReports } from '@/lib/server/reports';
import { requireActor } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Published' };

export default async function PublishedPage() {
  const actor = await requireActor();
  return (
    <>
      <PageHead title="Published" label="what buyers can read" />
      <ReportList first={await listReports(actor)} mayWithdraw={may(actor, 'report.withdraw')} />
    </>
  );
}
