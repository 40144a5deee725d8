import 'server-only';
import type { z } from 'zod';
import type { Actor, ShotDetail, ShotRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { reanalyseSchema, shotInputSchema } from '@/lib/shared/schemas';
import { unitStateWords } from '@/lib/shared/words';
import type { Analysis, Shot } from '@/models/testing';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';
import { openStates } from './moves';
import { enqueue } from './queue';
import { shotRow } from './run-rows';
import { runById, unitOf } from './runs';
import { storedPicture } from './stored-picture';
import { pictureUrl, unitRow } from './unit-rows';
import { findOriginal } from './uploads';

/** Adds an uploaded original to a run and queues its analysis, in one transaction. Adding it again changes nothing. */
export async function addShot(
  actor: Actor,
  runId: string,
  { sha256, name }: z.output<typeof shotInputSchema>,
): Promise<ShotRow> {
  demand(actor, 'shot.add');
  const run = await runById(actor, runId);
  const unit = unitOf(run);
  if (!openStates.includes(unit.state)) {
    throw new UserError(
      'conflict',
      `${unit.tag} is “${unitStateWords[unit.state]}”: its test runs are closed.`,
    );
  }
  const original = await findOriginal(actor, sha256);
  if (!original) throw new UserError('notFound', 'Upload the file first.');
  const where = inShop(actor, { runId, originalId: original.id });
  const id = await change(actor, async (transaction) => {
    const known = await db().Shot.findOne({ where, transaction });
    if (known) return known.id;
    const file = name.split(/[\\/]/).at(-1) || 'photograph';
    const shot = await db().Shot.create(
      { ...where, name: file, addedById: actor.userId },
      { transaction },
    );
    await enqueue(transaction, { kind: 'analyse-shot', subjectId: shot.id });
    await unit.update({ changedAt: new Date() }, { transaction });
    await record(transaction, actor, 'shot.add', ['Shot', shot.id], { tag: unit.tag, sha256 });
    return shot.id;
  });
  return shotRow(await shotById(actor, id));
}

export async function getShot(actor: Actor, id: string): Promise<ShotDetail> {
  demand(actor, 'run.read');
  const shot = await shotById(actor, id);
  const run = await runById(actor, shot.runId);
  const [unit, neighbours, analyses] = await Promise.all([
    unitRow(actor, unitOf(run)),
    neighboursOf(actor, shot),
    db().Analysis.findAll({
      attributes: ['id', 'version', 'at'],
      where: inShop(actor, { shotId: id }),
      order: [['at', 'DESC']],
    }),
  ]);
  const analysis = shot.latestAnalysis ?? null;
  return {
    ...shotRow(shot),
    unit,
    runId: run.id,
    runTitle: run.title,
    ...neighbours,
    width: analysis?.width ?? null,
    height: analysis?.height ?? null,
    view: analysis ? pictureUrl(id, 'view') : null,
    analyses: analyses.map(({ id, version, at }) => ({ id, version, at: at.toISOString() })),
    analysis: analysis && analysisView(id, analysis),
  };
}

function analysisView(shotId: string, analysis: Analysis): NonNullable<ShotDetail['analysis']> {
  const { id, version, at, kind, width, height, capture, registration } = analysis;
  const { metrics, warnings, milliseconds, plots, pictures } = analysis;
  return {
    id,
    version,
    at: at.toISOString(),
    kind,
    width,
    height,
    capture,
    registration: registration ?? null,
    metrics,
    warnings,
    milliseconds,
    plots,
    crops: pictures.flatMap((picture) =>
      picture.station
        ? {
            station: picture.station,
            url: pictureUrl(shotId, picture.name),
            width: picture.width,
            height: picture.height,
          }
        : [],
    ),
  };
}

/** Queues the shot again; earlier analyses stay. */
export async function reanalyse(
  actor: Actor,
  id: string,
  { kind }: z.output<typeof reanalyseSchema>,
): Promise<ShotRow> {
  demand(actor, 'shot.analyse');
  const shot = await shotById(actor, id);
  await change(actor, async (transaction) => {
    await shot.update(
      {
        state: 'queued',
        requestedKind: kind ?? shot.requestedKind,
        progress: 0,
        error: null,
        changedAt: new Date(),
      },
      { transaction },
    );
    await enqueue(transaction, { kind: 'analyse-shot', subjectId: id });
    await record(transaction, actor, 'shot.analyse', ['Shot', id], { kind: shot.requestedKind });
  });
  return shotRow(await shotById(actor, id));
}

/** Answers with `thumb`, `view` or `crop-<station>` of the shot's latest analysis. */
export async function shotPicture(
  actor: Actor,
  id: string,
  name: string,
  request: Request,
): Promise<Response> {
  demand(actor, 'run.read');
  const shot = await shotById(actor, id);
  const picture = shot.latestAnalysis?.pictures.find((candidate) => candidate.name === name);
  if (!picture) throw new UserError('notFound', 'No such picture of this shot.');
  return storedPicture(request, picture, `"${picture.sha256}"`, 'private, no-cache');
}

export async function shotById(actor: Actor, id: string): Promise<Shot> {
  const shot = await db().Shot.findOne({
    where: inShop(actor, { id }),
    include: ['original', 'latestAnalysis'],
  });
  if (!shot) throw new UserError('notFound', 'No such photograph in this shop.');
  return shot;
}

async function neighboursOf(actor: Actor, { id, runId }: Shot) {
  const all = await db().Shot.findAll({
    attributes: ['id'],
    where: inShop(actor, { runId }),
    order: [
      ['addedAt', 'ASC'],
      ['id', 'ASC'],
    ],
  });
  const place = all.findIndex((other) => other.id === id);
  return { previous: all[place - 1]?.id ?? null, next: all[place + 1]?.id ?? null };
}
