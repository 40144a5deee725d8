import 'server-only';
import type { z } from 'zod';
import type { Actor, LogEntryView } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { logEntrySchema } from '@/lib/shared/schemas';
import { unitStateWords } from '@/lib/shared/words';
import type { LogEntry, Unit } from '@/models/bench';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';
import { openStates } from './moves';
import { unitByTag } from './unit-rows';

/** Adds to the bench log. Nothing is ever edited: a later entry amends an earlier one. */
export async function addLogEntry(
  actor: Actor,
  tag: string,
  input: z.output<typeof logEntrySchema>,
): Promise<LogEntryView> {
  demand(actor, 'log.add');
  const unit = await openUnit(actor, tag);
  const { amends, ...entry } = input;
  if (
    amends &&
    !(await db().LogEntry.findOne({ where: inShop(actor, { id: amends, unitId: unit.id }) }))
  ) {
    throw new UserError('invalid', 'The entry to amend is not in this unit’s log.');
  }
  return change(actor, async (transaction) => {
    const row = await db().LogEntry.create(
      {
        ...inShop(actor, entry),
        unitId: unit.id,
        amendsId: amends ?? null,
        byId: actor.userId,
      },
      { transaction },
    );
    await unit.update({ changedAt: new Date() }, { transaction });
    await record(transaction, actor, 'log.add', ['LogEntry', row.id], { tag, kind: entry.kind });
    return logView(row, actor.name);
  });
}

/** The unit, if bench work may be written down in its state. */
export async function openUnit(actor: Actor, tag: string): Promise<Unit> {
  const unit = await unitByTag(actor, tag);
  if (openStates.includes(unit.state)) return unit;
  throw new UserError(
    'conflict',
    `${tag} is “${unitStateWords[unit.state]}”: bring it back to the bench first.`,
  );
}

export function logView(row: LogEntry, by: string): LogEntryView {
  return {
    id: row.id,
    kind: row.kind,
    text: row.text,
    minutes: row.minutes ?? null,
    costMinor: row.costMinor ?? null,
    at: row.at.toISOString(),
    by,
    amends: row.amendsId ?? null,
  };
}
