import type { Metadata } from 'next';
import { newestTarget } from '@/components/runs/newest-target';
import { RunView } from '@/components/runs/run-view';
import { getRun } from '@/lib/server/runs';
import { requireActor } from '@/lib/server/session';
import { getShot } from '@/lib/server/shots';
import { getUnit } from '@/lib/server/units';
import { read } from '../../../../read';

type Props = { params: Promise<{ tag: string; id: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Test run of ${(await params).tag}` };
}

export default async function RunPage({ params }: Props) {
  const actor = await requireActor();
  const { tag, id } = await params;
  const [run, unit] = await Promise.all([read(getRun(actor, id)), read(getUnit(actor, tag))]);
  const newest = newestTarget(run.shotList);
  const shot = newest ? await read(getShot(actor, newest.id)) : null;
  const siblings = unit.runs.map(({ id: runId, title }) => ({ id: runId, title })).reverse();
  const measured = (phase: string) => unit.runs.some((r) => r.phase === phase && r.done > 0);
  return (
    <RunView
      key={id}
      first={run}
      firstShot={shot}
      siblings={siblings}
      comparable={measured('before') && measured('after')}
    />
  );
}
