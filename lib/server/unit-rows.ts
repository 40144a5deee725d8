import 'server-only';
import { Op } from 'sequelize';
import type { Actor, UnitRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { Unit } from '@/models/bench';
import { inShop } from './access';
import { db } from './db';

export const pictureUrl = (shotId: string, name: string) => `/api/shots/${shotId}/pictures/${name}`;

/** The unit with this tag in the person's shop. */
export async function unitByTag(actor: Actor, tag: string): Promise<Unit> {
  const unit = await db().Unit.findOne({
    where: inShop(actor, { tag }),
    include: ['cameraModel', 'receivedBy'],
  });
  if (!unit) throw new UserError('notFound', `No unit with the tag ${tag} in this shop.`);
  return unit;
}

/** Rows for units that were read with their camera model. */
export async function unitRows(actor: Actor, units: readonly Unit[]): Promise<UnitRow[]> {
  const ids = units.map((unit) => unit.id);
  const [grades, pictures] = await Promise.all([gradesOf(actor, ids), picturesOf(actor, ids)]);
  return units.map((unit) => ({
    tag: unit.tag,
    maker: unit.cameraModel?.maker ?? '',
    model: unit.cameraModel?.name ?? '',
    modelClass: unit.cameraModel?.modelClass ?? 'small-sensor-compact',
    serial: unit.serial,
    state: unit.state,
    fault: unit.fault,
    grade: grades.get(unit.id) ?? null,
    receivedAt: unit.receivedAt.toISOString(),
    changedAt: unit.changedAt.toISOString(),
    picture: pictures.get(unit.id) ?? null,
  }));
}

export async function unitRow(actor: Actor, unit: Unit): Promise<UnitRow> {
  const [row] = await unitRows(actor, [unit]);
  if (!row) throw new Error('A unit gave no row.');
  return row;
}

async function gradesOf(actor: Actor, unitIds: string[]) {
  const grades = await db().Grade.findAll({
    where: inShop(actor, { standingUnitId: { [Op.in]: unitIds } }),
  });
  return new Map(grades.map((grade) => [grade.unitId, grade.letter]));
}

/** Thumbnail of the newest analysed target shot of each unit. */
async function picturesOf(actor: Actor, unitIds: string[]): Promise<Map<string, string>> {
  const runs = await db().Run.findAll({ where: inShop(actor, { unitId: { [Op.in]: unitIds } }) });
  const unitOf = new Map(runs.map((run) => [run.id, run.unitId]));
  const shots = await db().Shot.findAll({
    attributes: ['id', 'runId'],
    where: inShop(actor, {
      runId: { [Op.in]: [...unitOf.keys()] },
      kind: 'target',
      latestAnalysisId: { [Op.ne]: null },
    }),
    order: [['addedAt', 'ASC']],
  });
  return new Map(shots.map((shot) => [unitOf.get(shot.runId) ?? '', pictureUrl(shot.id, 'thumb')]));
}
