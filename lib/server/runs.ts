import 'server-only';
import type { z } from 'zod';
import type { Actor, RunDetail } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { runInputSchema } from '@/lib/shared/schemas';
import type { Unit } from '@/models/bench';
import type { Run } from '@/models/testing';
import { demand, inShop, may } from './access';
import { change, record } from './audit';
import { db } from './db';
import { openUnit } from './log';
import { openStates } from './moves';
import { proposalOfRun } from './proposals';
import { peersOf, resultsOfRun, withPeers } from './results';
import { runRow, shotParts, shotRow } from './run-rows';
import { unitRow } from './unit-rows';

/** Starts a test run on a unit that is open for work. */
export async function createRun(
  actor: Actor,
  tag: string,
  input: z.output<typeof runInputSchema>,
): Promise<{ id: string }> {
  demand(actor, 'run.create');
  const unit = await openUnit(actor, tag);
  return change(actor, async (transaction) => {
    const run = await db().Run.create(
      { ...inShop(actor, input), unitId: unit.id, startedById: actor.userId },
      { transaction },
    );
    await unit.update({ changedAt: new Date() }, { transaction });
    await record(transaction, actor, 'run.create', ['Run', run.id], { tag, phase: run.phase });
    return { id: run.id };
  });
}

/** The run with its shots, mean results against the peers, and the grade they propose. */
export async function getRun(actor: Actor, id: string): Promise<RunDetail> {
  demand(actor, 'run.read');
  const run = await runById(actor, id);
  const unit = unitOf(run);
  const [row, shots, results, peers] = await Promise.all([
    unitRow(actor, unit),
    db().Shot.findAll({
      where: inShop(actor, { runId: id }),
      include: shotParts,
      order: [
        ['addedAt', 'ASC'],
        ['id', 'ASC'],
      ],
    }),
    resultsOfRun(actor, id),
    peersOf(actor, unit),
  ]);
  return {
    ...runRow(run, shots),
    unit: row,
    shotList: shots.map(shotRow),
    proposal: await proposalOfRun(actor, unit, results, peers),
    results: withPeers(results, peers),
    peers: { units: peers.length },
    mayUpload: may(actor, 'shot.add') && openStates.includes(unit.state),
  };
}

/** A run of the person's shop, with its unit. */
export async function runById(actor: Actor, id: string): Promise<Run> {
  const run = await db().Run.findOne({
    where: inShop(actor, { id }),
    include: [{ association: 'unit', include: ['cameraModel'] }],
  });
  if (!run) throw new UserError('notFound', 'No such test run in this shop.');
  return run;
}

export function unitOf(run: Run): Unit {
  if (!run.unit) throw new Error('The run was read without its unit.');
  return run.unit;
}

/** The run that a grade rests on: the newest one after the repair. */
export function gradedRun(actor: Actor, unitId: string): Promise<Run | null> {
  return db().Run.findOne({
    where: inShop(actor, { unitId, phase: 'after' }),
    order: [['startedAt', 'DESC']],
  });
}

/** Refuses to send a unit to grading before its newest run has been measured through. */
export async function demandEvidence(actor: Actor, unit: Unit): Promise<void> {
  const run = await gradedRun(actor, unit.id);
  const shots = run ? await db().Shot.findAll({ where: inShop(actor, { runId: run.id }) }) : [];
  if (!shots.some((shot) => shot.kind === 'target' && shot.latestAnalysisId)) {
    throw new UserError(
      'conflict',
      'Nothing to grade yet: add photographs of the target to a run after the repair.',
    );
  }
  if (shots.some((shot) => shot.state === 'queued' || shot.state === 'analysing')) {
    throw new UserError('conflict', 'Wait until the run’s last photographs are measured.');
  }
}
