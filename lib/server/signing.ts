import 'server-only';
import type { Actor } from '@/lib/shared/api';
import type { Unit } from '@/models/bench';
import { inShop, may } from './access';
import { db } from './db';

/** Did this person do bench work on the unit: write in its log, check functions, start a run or add photographs? */
export async function workedOn(actor: Actor, unitId: string): Promise<boolean> {
  const { LogEntry, FunctionCheck, Run, Shot } = db();
  const mine = inShop(actor, { unitId, byId: actor.userId });
  const runs = await Run.findAll({
    attributes: ['id', 'startedById'],
    where: inShop(actor, { unitId }),
  });
  if (runs.some((run) => run.startedById === actor.userId)) return true;
  const runId = runs.map((run) => run.id);
  const counts = await Promise.all([
    LogEntry.count({ where: mine }),
    FunctionCheck.count({ where: mine }),
    Shot.count({ where: inShop(actor, { runId, addedById: actor.userId }) }),
  ]);
  return counts.some((count) => count > 0);
}

export interface Signing {
  /** May sign now, by role, state and work. */
  allowed: boolean;
  /** Signing would be signing one's own bench work, which the shop allows. */
  ownWork: boolean;
  /** Why not, for someone whose role may sign. */
  refusal: string | null;
}

/** A second person signs: never someone who did bench work on the unit, unless the shop says so. */
export async function signingOf(actor: Actor, unit: Unit): Promise<Signing> {
  if (!may(actor, 'grade.sign')) return { allowed: false, ownWork: false, refusal: null };
  const [own, shop] = await Promise.all([
    workedOn(actor, unit.id),
    db().Shop.findByPk(actor.shopId, { rejectOnEmpty: true }),
  ]);
  if (own && !shop.signOwnWork) {
    const refusal = 'You worked on this camera yourself, so someone else has to sign its grade.';
    return { allowed: false, ownWork: true, refusal };
  }
  return { allowed: unit.state === 'awaiting-grade', ownWork: own, refusal: null };
}
