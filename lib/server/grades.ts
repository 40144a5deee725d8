import 'server-only';
import type { z } from 'zod';
import type { Actor, GradingRow, Proposal, UnitDetail } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { signGradeSchema } from '@/lib/shared/schemas';
import type { Unit } from '@/models/bench';
import type { Run } from '@/models/testing';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';
import { moveUnit } from './moves';
import { proposalOfRun } from './proposals';
import { analysisIds, peersOf, resultsOfRun } from './results';
import { gradedRun } from './runs';
import { schemeRow } from './schemes';
import { signingOf } from './signing';
import { unitByTag, unitRow } from './unit-rows';
import { getUnit } from './units';

/** The grade proposed for a unit by its newest run after the repair; null while nothing is measured. */
export async function proposeGrade(actor: Actor, tag: string): Promise<Proposal | null> {
  demand(actor, 'grade.read');
  const unit = await unitByTag(actor, tag);
  const run = await gradedRun(actor, unit.id);
  return run && proposalFor(actor, unit, run);
}

async function proposalFor(actor: Actor, unit: Unit, run: Run): Promise<Proposal | null> {
  const [samples, peers] = await Promise.all([resultsOfRun(actor, run.id), peersOf(actor, unit)]);
  return proposalOfRun(actor, unit, samples, peers);
}

/** Units that await a grade, those sent first on top. */
export async function gradingQueue(actor: Actor): Promise<GradingRow[]> {
  demand(actor, 'grade.queue');
  const units = await db().Unit.findAll({
    where: inShop(actor, { state: 'awaiting-grade' }),
    include: ['cameraModel'],
    order: [['changedAt', 'ASC']],
  });
  const rows = await Promise.all(units.map((unit) => gradingRow(actor, unit)));
  return rows.filter((row) => row !== null);
}

async function gradingRow(actor: Actor, unit: Unit): Promise<GradingRow | null> {
  const run = await gradedRun(actor, unit.id);
  if (!run) return null;
  const [row, proposal, sent, signing] = await Promise.all([
    unitRow(actor, unit),
    proposalFor(actor, unit, run),
    db().StateChange.findOne({
      where: inShop(actor, { unitId: unit.id, toState: 'awaiting-grade' }),
      include: ['by'],
      order: [['at', 'DESC']],
    }),
    signingOf(actor, unit),
  ]);
  return {
    ...row,
    runId: run.id,
    proposal,
    sentAt: (sent?.at ?? unit.changedAt).toISOString(),
    sentBy: sent?.by?.name ?? '',
    maySign: signing.allowed,
  };
}

/** Signs the proposed grade, or another with a written reason. The grade keeps its scheme, rules and analyses. */
export async function signGrade(
  actor: Actor,
  tag: string,
  { letter, reason }: z.output<typeof signGradeSchema>,
): Promise<UnitDetail> {
  demand(actor, 'grade.sign');
  await change(actor, async (transaction) => {
    const unit = await unitByTag(actor, tag);
    const { proposal, run, ownWork } = await signable(actor, unit);
    if (letter !== proposal.letter && !reason) {
      throw new UserError('invalid', `Say why this is ${letter} and not ${proposal.letter}.`, {
        reason: 'Give the reason for another grade than the proposed one.',
      });
    }
    const modelClass = unit.cameraModel?.modelClass ?? 'small-sensor-compact';
    const scheme = await schemeRow(actor, modelClass, transaction);
    await db().Grade.update(
      { standingUnitId: null, supersededAt: new Date() },
      { where: inShop(actor, { standingUnitId: unit.id }), transaction },
    );
    const grade = await db().Grade.create(
      {
        ...inShop(actor, { unitId: unit.id, standingUnitId: unit.id, runId: run.id, letter }),
        schemeId: scheme.id,
        proposed: proposal.letter,
        reason: reason || null,
        signedById: actor.userId,
        ownWork,
        analysisIds: await analysisIds(actor, [run.id]),
      },
      { transaction },
    );
    await db().RuleResult.bulkCreate(
      proposal.rules.map((outcome, position) => ({
        ...inShop(actor, { gradeId: grade.id, position, outcome }),
        ruleId: outcome.ruleId,
        value: outcome.value,
        standing: outcome.standing,
        allows: outcome.allows,
      })),
      { transaction },
    );
    await record(transaction, actor, 'grade.sign', ['Grade', grade.id], {
      tag,
      letter,
      proposed: proposal.letter,
      ownWork,
    });
    await moveUnit(transaction, actor, unit, 'graded');
  });
  return getUnit(actor, tag);
}

async function signable(actor: Actor, unit: Unit) {
  if (unit.state !== 'awaiting-grade') {
    throw new UserError(
      'conflict',
      `${unit.tag} doesn’t await a grade. Reload to see where it is.`,
    );
  }
  const signing = await signingOf(actor, unit);
  if (!signing.allowed) throw new UserError('forbidden', signing.refusal ?? 'You can’t sign this.');
  const run = await gradedRun(actor, unit.id);
  const proposal = run && (await proposalFor(actor, unit, run));
  if (!run || !proposal) throw new UserError('conflict', 'Nothing has been measured yet.');
  return { run, proposal, ownWork: signing.ownWork };
}
