import 'server-only';
import { Op } from 'sequelize';
import type { Actor, RunRow, ShotRow } from '@/lib/shared/api';
import { shotHeadline } from '@/lib/shared/findings';
import type { Run, Shot } from '@/models/testing';
import { inShop } from './access';
import { db } from './db';
import { pictureUrl } from './unit-rows';

export function runRow(run: Run, shots: readonly Pick<Shot, 'state'>[]): RunRow {
  const count = (state: Shot['state']) => shots.filter((shot) => shot.state === state).length;
  return {
    id: run.id,
    title: run.title,
    phase: run.phase,
    startedAt: run.startedAt.toISOString(),
    shots: shots.length,
    done: count('done'),
    failed: count('failed'),
  };
}

/** A unit's runs, newest first. */
export async function runRows(actor: Actor, unitId: string): Promise<RunRow[]> {
  const runs = await db().Run.findAll({
    where: inShop(actor, { unitId }),
    order: [['startedAt', 'DESC']],
  });
  const shots = await db().Shot.findAll({
    attributes: ['runId', 'state'],
    where: inShop(actor, { runId: { [Op.in]: runs.map((run) => run.id) } }),
  });
  return runs.map((run) =>
    runRow(
      run,
      shots.filter((shot) => shot.runId === run.id),
    ),
  );
}

/** Include that `shotRow` needs: everything but the bulky plots. */
export const shotParts = [
  'original',
  { association: 'latestAnalysis', attributes: ['id', 'metrics', 'pictures'] },
];

export function shotRow(shot: Shot): ShotRow {
  const analysis = shot.latestAnalysis;
  return {
    id: shot.id,
    name: shot.name,
    sha256: shot.original?.sha256 ?? '',
    bytes: shot.original?.bytes ?? 0,
    state: shot.state,
    kind: shot.kind ?? null,
    progress: shot.progress,
    takenAt: shot.takenAt ?? null,
    addedAt: shot.addedAt.toISOString(),
    error: shot.error ?? null,
    warnings: shot.warnings,
    thumbnail: analysis ? pictureUrl(shot.id, 'thumb') : null,
    headline: analysis ? shotHeadline(analysis.metrics) : null,
  };
}
