import type { Metadata } from 'next';
import { Desk } from '@/components/grading/desk';
import { newestTarget } from '@/components/runs/newest-target';
import { newestAfter } from '@/components/units/next-step';
import { proposeGrade } from '@/lib/server/grades';
import { getRun } from '@/lib/server/runs';
import { requireActor } from '@/lib/server/session';
import { getShot } from '@/lib/server/shots';
import { getUnit } from '@/lib/server/units';
import { read } from '../../read';

type Props = { params: Promise<{ tag: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Grade ${(await params).tag}` };
}

export default async function DeskPage({ params }: Props) {
  const actor = await requireActor();
  const { tag } = await params;
  const unit = await read(getUnit(actor, tag));
  const newest = newestAfter(unit.runs);
  const [proposal, run] = await Promise.all([
    proposeGrade(actor, tag),
    newest ? getRun(actor, newest.id) : null,
  ]);
  const target = run && newestTarget(run.shotList);
  const shot = target ? await getShot(actor, target.id) : null;
  return <Desk key={tag} first={unit} firstProposal={proposal} run={run} shot={shot} />;
}
