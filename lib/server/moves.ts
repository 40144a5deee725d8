import 'server-only';
import type { Transaction } from 'sequelize';
import type { Actor } from '@/lib/shared/api';
import type { UnitState } from '@/lib/shared/words';
import type { Unit } from '@/models/bench';
import { inShop } from './access';
import { record } from './audit';
import { db } from './db';

/** Moves a unit and writes the `StateChange` that goes with it; the only way in which `state` changes. */
export async function moveUnit(
  transaction: Transaction,
  actor: Actor,
  unit: Unit,
  to: UnitState,
  note?: string,
): Promise<void> {
  const from = unit.state;
  await unit.update({ state: to, changedAt: new Date() }, { transaction });
  await db().StateChange.create(
    {
      ...inShop(actor, { unitId: unit.id, byId: actor.userId }),
      fromState: from,
      toState: to,
      note: note || null,
    },
    { transaction },
  );
  await record(transaction, actor, 'unit.move', ['Unit', unit.id], { from, to });
}

/** States in which bench work and test runs may be written down; while a grade is awaited the evidence holds still. */
export const openStates: readonly UnitState[] = ['received', 'on-the-bench', 'testing', 'returned'];
