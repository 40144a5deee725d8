import type { Metadata } from 'next';
import { GradingQueue } from '@/components/grading/grading-queue';
import { ButtonLink } from '@/components/ui/button';
import { PageHead } from '@/components/ui/panel';
import { ErrorState } from '@/components/ui/states';
import { may } from '@/lib/server/access';
import { gradingQueue } from '@/lib/server/grades';
import { requireActor } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Grading' };

export default async function GradingPage() {
  const actor = await requireActor();
  if (!may(actor, 'grade.queue'))
    return (
      <ErrorState
        title="Grading is for a second person"
        action={<ButtonLink href="/bench">To the bench</ButtonLink>}
      >
        Whoever mends a camera does not grade it. Ask the shop’s owner if you should be a grader.
      </ErrorState>
    );
  return (
    <>
      <PageHead title="Grading" label="longest waiting first" />
      <GradingQueue first={await gradingQueue(actor)} now={Date.now()} />
    </>
  );
}
