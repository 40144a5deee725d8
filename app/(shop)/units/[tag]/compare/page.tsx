import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { CompareView, type Side } from '@/components/runs/compare-view';
import { newestTarget } from '@/components/runs/newest-target';
import { getRun } from '@/lib/server/runs';
import { requireActor } from '@/lib/server/session';
import { getShot } from '@/lib/server/shots';
import { getUnit } from '@/lib/server/units';
import type { Actor, RunRow } from '@/lib/shared/api';
import { read } from '../../../read';

type Props = { params: Promise<{ tag: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `${(await params).tag} before and after` };
}

/** The newest measured run from before the repair beside the newest from after it. */
export default async function ComparePage({ params }: Props) {
  const actor = await requireActor();
  const { tag } = await params;
  const unit = await read(getUnit(actor, tag));
  const newest = (phase: RunRow['phase']) =>
    unit.runs
      .filter((run) => run.phase === phase && run.done > 0)
      .toSorted((a, b) => b.startedAt.localeCompare(a.startedAt))[0];
  const [before, after] = [newest('before'), newest('after')];
  if (!before || !after) notFound();
  const sides = await Promise.all([sideOf(actor, before.id), sideOf(actor, after.id)]);
  return <CompareView before={sides[0]} after={sides[1]} />;
}

async function sideOf(actor: Actor, id: string): Promise<Side> {
  const run = await read(getRun(actor, id));
  const target = newestTarget(run.shotList);
  return { run, shot: target ? await read(getShot(actor, target.id)) : null };
}
