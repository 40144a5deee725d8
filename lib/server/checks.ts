import 'server-only';
import type { z } from 'zod';
import type { Actor, UnitDetail } from '@/lib/shared/api';
import type { checksSchema } from '@/lib/shared/schemas';
import { functionCheckItems } from '@/lib/shared/words';
import type { FunctionCheck } from '@/models/bench';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';
import { openUnit } from './log';

const labels = new Map<string, string>(functionCheckItems.map(({ id, label }) => [id, label]));

/** Records function checks; one that fails opens an entry in the bench log. */
export async function saveChecks(
  actor: Actor,
  tag: string,
  { checks }: z.output<typeof checksSchema>,
): Promise<UnitDetail['checks']> {
  demand(actor, 'check.save');
  const unit = await openUnit(actor, tag);
  const base = inShop(actor, { unitId: unit.id, byId: actor.userId });
  await change(actor, async (transaction) => {
    const last = [...new Map(checks.map((check) => [check.item, check])).values()];
    await db().FunctionCheck.bulkCreate(
      last.map((check) => ({ ...base, ...check })),
      { transaction },
    );
    await db().LogEntry.bulkCreate(
      last
        .filter((check) => check.outcome === 'fail')
        .map(({ item, note }) => ({
          ...base,
          kind: 'symptom' as const,
          text: `${labels.get(item)} failed its check${note ? `: ${note}` : '.'}`,
        })),
      { transaction },
    );
    await unit.update({ changedAt: new Date() }, { transaction });
    await record(transaction, actor, 'check.save', ['Unit', unit.id], {
      tag,
      checks: checks.map(({ item, outcome }) => ({ item, outcome })),
    });
  });
  return checkViews(await newestChecks(actor, unit.id));
}

/** The newest outcome of each item, in the order of the list. */
export async function newestChecks(actor: Actor, unitId: string): Promise<FunctionCheck[]> {
  const rows = await db().FunctionCheck.findAll({
    where: inShop(actor, { unitId }),
    include: ['by'],
    order: [['at', 'ASC']],
  });
  const newest = new Map(rows.map((row) => [row.item, row]));
  return functionCheckItems.flatMap(({ id }) => newest.get(id) ?? []);
}

export const checkViews = (rows: readonly FunctionCheck[]): UnitDetail['checks'] =>
  rows.map((row) => ({
    item: row.item,
    label: labels.get(row.item) ?? row.item,
    outcome: row.outcome,
    note: row.note ?? null,
    at: row.at.toISOString(),
    by: row.by?.name ?? '',
  }));
