import 'server-only';
import { literal, Op, type OrderItem } from 'sequelize';
import type { z } from 'zod';
import type { Actor, Page, StateCounts, UnitDetail, UnitRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type {
  stateChangeSchema,
  UnitQuery,
  unitInputSchema,
  unitPatchSchema,
} from '@/lib/shared/schemas';
import { unitStates, unitStateWords } from '@/lib/shared/words';
import { demand, inShop, movesOf } from './access';
import { change, record } from './audit';
import { db } from './db';
import { findOrCreateModel } from './models';
import { moveUnit } from './moves';
import { demandEvidence } from './runs';
import { unitDetail } from './unit-detail';
import { unitByTag, unitRows } from './unit-rows';

export async function listUnits(actor: Actor, query: UnitQuery): Promise<Page<UnitRow>> {
  demand(actor, 'unit.read');
  const { page, pageSize } = query;
  const { rows, count } = await db().Unit.findAndCountAll({
    where: inShop(actor, { ...searching(query.q), ...(query.state && { state: query.state }) }),
    include: ['cameraModel'],
    order: orderOf(query),
    limit: pageSize,
    offset: (page - 1) * pageSize,
    subQuery: false,
  });
  return { rows: await unitRows(actor, rows), total: count, page, pageSize };
}

function searching(q: string | undefined) {
  if (!q) return {};
  const like = { [Op.like]: `%${q.replace(/[\\%_]/g, '\\$&')}%` };
  const fields = ['tag', 'serial', 'fault', '$cameraModel.maker$', '$cameraModel.name$'];
  return { [Op.or]: fields.map((field) => ({ [field]: like })) };
}

function orderOf({ sort, order }: UnitQuery): OrderItem[] {
  const direction = order === 'asc' ? 'ASC' : 'DESC';
  const states = unitStates.map((state) => `'${state}'`).join(',');
  const columns: Record<UnitQuery['sort'], OrderItem[]> = {
    tag: [],
    model: [
      [literal('`cameraModel`.`maker`'), direction],
      [literal('`cameraModel`.`name`'), direction],
    ],
    state: [[literal(`FIELD(\`Unit\`.\`state\`, ${states})`), direction]],
    received: [['receivedAt', direction]],
    changed: [['changedAt', direction]],
    // Ungraded units come last either way.
    grade: [
      [literal(`${gradeColumn} IS NULL`), 'ASC'],
      [literal(gradeColumn), direction],
    ],
  };
  return [...columns[sort], ['tag', direction]];
}
const gradeColumn = '(SELECT `letter` FROM `grades` WHERE `standingUnitId` = `Unit`.`id`)';

export async function stateCounts(actor: Actor): Promise<StateCounts> {
  demand(actor, 'unit.read');
  const groups = await db().Unit.count({ where: inShop(actor), group: ['state'] });
  const counts = new Map(groups.map((group) => [group.state, group.count]));
  const entries = unitStates.map((state) => [state, counts.get(state) ?? 0]);
  return Object.fromEntries(entries) as StateCounts;
}

export async function getUnit(actor: Actor, tag: string): Promise<UnitDetail> {
  demand(actor, 'unit.read');
  return unitDetail(actor, await unitByTag(actor, tag));
}

export async function createUnit(
  actor: Actor,
  input: z.output<typeof unitInputSchema>,
): Promise<UnitDetail> {
  demand(actor, 'unit.create');
  const { Shop, Unit, StateChange } = db();
  const { maker, model, modelClass, ...facts } = input;
  const tag = await change(actor, async (transaction) => {
    const shop = await Shop.findByPk(actor.shopId, { transaction, rejectOnEmpty: true });
    const camera = await findOrCreateModel(actor, { maker, model, modelClass }, transaction);
    const unit = await Unit.create(
      {
        ...inShop(actor, facts),
        modelId: camera.id,
        tag: `ML-${String(shop.nextTag).padStart(4, '0')}`,
        state: 'received',
        receivedById: actor.userId,
      },
      { transaction },
    );
    await shop.update({ nextTag: shop.nextTag + 1 }, { transaction });
    await StateChange.create(
      {
        ...inShop(actor, { unitId: unit.id, byId: actor.userId }),
        fromState: null,
        toState: 'received',
      },
      { transaction },
    );
    await record(transaction, actor, 'unit.create', ['Unit', unit.id], { tag: unit.tag });
    return unit.tag;
  });
  return getUnit(actor, tag);
}

export async function updateUnit(
  actor: Actor,
  tag: string,
  patch: z.output<typeof unitPatchSchema>,
): Promise<UnitDetail> {
  demand(actor, 'unit.edit');
  const unit = await unitByTag(actor, tag);
  await change(actor, async (transaction) => {
    await unit.update({ ...patch, changedAt: new Date() }, { transaction });
    await record(transaction, actor, 'unit.edit', ['Unit', unit.id], {
      changed: Object.keys(patch),
    });
  });
  return getUnit(actor, tag);
}

export async function changeState(
  actor: Actor,
  tag: string,
  { to, note }: z.output<typeof stateChangeSchema>,
): Promise<UnitDetail> {
  demand(actor, 'unit.move');
  await change(actor, async (transaction) => {
    const unit = await unitByTag(actor, tag);
    if (!movesOf(actor, unit.state).includes(to)) {
      const [from, goal] = [unitStateWords[unit.state], unitStateWords[to]];
      throw new UserError(
        'conflict',
        `${tag} can’t go from “${from}” to “${goal}” by your hand. Reload to see what is possible.`,
      );
    }
    if (to === 'awaiting-grade') await demandEvidence(actor, unit);
    await moveUnit(transaction, actor, unit, to, note);
  });
  return getUnit(actor, tag);
}
