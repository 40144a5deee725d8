import 'server-only';
import { createHash } from 'node:crypto';
import type { Transaction } from 'sequelize';
import type { Analysis, Metric } from '@/analysis/result';
import type { Unit } from '@/models/bench';
import { newId } from '@/models/id';
import type { DerivedPicture, Measurement, Run, Shot } from '@/models/testing';
import { db } from '../db';
import type { Handler } from '../queue';
import { derivedKey, getBytes, putBytes } from '../storage';
import type { Picture } from './pictures';
import { analyseInThread } from './pool';

/** Analyses one shot: fetch, measure and derive in a worker thread, store the pictures, write the results. */
export const shotHandler: Handler = {
  async work(shotId, signal) {
    const { Shot, Original, Run, Unit } = db();
    const shot = await Shot.findByPk(shotId, {
      include: [
        { model: Original, as: 'original' },
        { model: Run, as: 'run', include: [{ model: Unit, as: 'unit' }] },
      ],
      rejectOnEmpty: true,
    });
    const { original, run } = shot;
    if (!original || !run?.unit) throw new Error(`Shot ${shotId} hangs in the air.`);
    await progress(shot, 0.05);
    const bytes = await getBytes(original.key);
    await progress(shot, 0.15);
    const answer = await analyseInThread({ bytes, kind: shot.requestedKind }, signal);
    if (!answer.ok) return (transaction) => refuse(shot, answer.reason, transaction);

    await progress(shot, 0.85);
    const analysisId = newId();
    const pictures = await storePictures(shot.shopId, analysisId, answer.pictures);
    const unit = run.unit;
    return (transaction) =>
      keep({ shot, run, unit }, analysisId, answer.analysis, pictures, transaction);
  },

  async failed(shotId) {
    await db().Shot.update(
      {
        state: 'failed',
        progress: 0,
        error:
          'The analysis broke off, although it was tried several times. Analyse the shot again; if that fails too, the server’s log says why.',
        changedAt: new Date(),
      },
      { where: { id: shotId } },
    );
  },
};

async function progress(shot: Shot, share: number): Promise<void> {
  await shot.update({ state: 'analysing', progress: share, error: null, changedAt: new Date() });
}

async function refuse(shot: Shot, reason: string, transaction: Transaction): Promise<void> {
  await shot.update(
    { state: 'failed', progress: 0, error: reason.slice(0, 1000), changedAt: new Date() },
    { transaction },
  );
}

async function storePictures(
  shopId: string,
  analysisId: string,
  pictures: Picture[],
): Promise<DerivedPicture[]> {
  return Promise.all(
    pictures.map(async ({ bytes, ...picture }) => {
      const key = derivedKey(shopId, analysisId, picture.name);
      await putBytes(key, bytes, picture.mediaType);
      const sha256 = createHash('sha256').update(bytes).digest('hex');
      return { ...picture, key, sha256, bytes: bytes.byteLength };
    }),
  );
}

async function keep(
  { shot, run, unit }: { shot: Shot; run: Run; unit: Unit },
  analysisId: string,
  analysis: Analysis,
  pictures: DerivedPicture[],
  transaction: Transaction,
): Promise<void> {
  const { Analysis, Measurement } = db();
  const { shopId } = run;
  const { registration = null, ...result } = analysis;
  await Analysis.create(
    { ...result, id: analysisId, shopId, shotId: shot.id, registration, pictures },
    { transaction },
  );
  const owners = { shopId, analysisId, modelId: unit.modelId, unitId: unit.id };
  await Measurement.bulkCreate(
    analysis.metrics.flatMap(numbersOf).map((number) => ({ ...owners, ...number })),
    { transaction },
  );
  await shot.update(
    {
      state: 'done',
      kind: analysis.kind,
      progress: 1,
      takenAt: analysis.capture.takenAt,
      error: null,
      warnings: analysis.warnings.length,
      latestAnalysisId: analysisId,
      changedAt: new Date(),
    },
    { transaction },
  );
}

type Number = Pick<Measurement, 'name' | 'value' | 'unit' | 'uncertainty'> & {
  zone: string;
  edge: Measurement['edge'];
};

/** A metric and the numbers it carries along under names of their own (`quantities.ts`). */
function numbersOf(metric: Metric): Number[] {
  const { name, zone = '', edge = '', value, unit, uncertainty, tangential, lwph } = metric;
  const numbers: Number[] = [{ name, zone, edge, value, unit, uncertainty }];
  if (tangential !== undefined) {
    numbers.push({ name: `${name}Tangential`, zone, edge, value: tangential, unit, uncertainty });
  }
  if (lwph !== undefined && value > 0) {
    numbers.push({
      name: 'sharpness.lwph',
      zone,
      edge,
      value: lwph,
      unit: 'LW/PH',
      // The same measurement on another scale.
      uncertainty: (uncertainty * lwph) / value,
    });
  }
  return numbers;
}
