import { createHash } from 'node:crypto';
import sharp from 'sharp';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { renderScene } from '@/fixtures/scene/render';
import { db } from '@/lib/server/db';
import { type Dispatcher, runLanes } from '@/lib/server/lanes';
import { enqueue } from '@/lib/server/queue';
import { getBytes, originalKey, putBytes } from '@/lib/server/storage';
import { closeThreads } from '@/lib/server/worker/pool';
import { shotHandler } from '@/lib/server/worker/shot-job';
import { newId } from '@/models/id';

const kind = 'analyse-shot';
let lanes: Dispatcher;
let owners: { shopId: string; runId: string; addedById: string };

beforeAll(async () => {
  const { Shop, User, CameraModel, Unit, Run } = db();
  const shop = await Shop.create({ name: 'Analyses' });
  const { id: userId } = await User.create({
    email: `${newId()}@example.org`,
    name: 'Jo',
    passwordHash: 'x',
  });
  const shopId = shop.id;
  const model = await CameraModel.create({
    shopId,
    maker: 'Tarnfell',
    name: 'Skiff 12',
    modelClass: 'small-sensor-compact',
  });
  const unit = await Unit.create({
    shopId,
    modelId: model.id,
    tag: 'ML-0001',
    serial: 'secret-serial',
    state: 'testing',
    fault: 'dark',
    accessories: [],
    receivedById: userId,
  });
  const run = { shopId, unitId: unit.id, title: 'After', phase: 'after', startedById: userId };
  const { id: runId } = await Run.create({ ...run, phase: 'after' });
  owners = { shopId, runId, addedById: userId };
  lanes = runLanes([{ kind, handler: shotHandler, width: 2 }], { leaseMs: 30_000, lookMs: 50 });
});
afterAll(async () => {
  await lanes.stop();
  await closeThreads();
  await db().sequelize.close();
});

async function drop(bytes: Uint8Array, name: string): Promise<string> {
  const { Original, Shot, sequelize } = db();
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  const key = originalKey(owners.shopId, sha256);
  await putBytes(key, bytes, 'image/jpeg');
  const file = { sha256, key, mediaType: 'image/jpeg', bytes: bytes.byteLength };
  const original = await Original.create({ ...owners, ...file });
  return sequelize.transaction(async (transaction) => {
    const shot = await Shot.create({ ...owners, originalId: original.id, name }, { transaction });
    await enqueue(transaction, { kind, subjectId: shot.id });
    return shot.id;
  });
}

async function settled(id: string) {
  for (;;) {
    const shot = await db().Shot.findByPk(id, { include: ['latestAnalysis'], rejectOnEmpty: true });
    if (shot.state === 'done' || shot.state === 'failed') return shot;
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
}

// Truth by construction: the renderer planted the exposure and wrote the Exif.
test('a photograph of the target becomes an analysis, its numbers and its pictures', async () => {
  const { bytes } = await renderScene({
    width: 1200,
    height: 900,
    exposureEv: -0.5,
    exif: { make: 'Tarnfell', serial: 'secret-serial', takenAt: '2026-11-02T10:15:00' },
  });
  const shot = await settled(await drop(bytes, 'IMG_1.JPG'));
  const { latestAnalysis: analysis, error } = shot;
  expect(error).toBeNull();
  if (!analysis) throw new Error('no analysis');
  expect(shot).toMatchObject({
    state: 'done',
    kind: 'target',
    progress: 1,
    takenAt: '2026-11-02T10:15:00',
  });
  expect(shot.warnings).toBe(analysis.warnings.length);

  const { Measurement } = db();
  const rows = await Measurement.findAll({ where: { analysisId: analysis.id } });
  const extra = analysis.metrics.filter(({ tangential }) => tangential !== undefined).length;
  const pictureHeights = analysis.metrics.filter(({ lwph }) => lwph !== undefined).length;
  expect(rows).toHaveLength(analysis.metrics.length + extra + pictureHeights);
  const bias = rows.find(({ name }) => name === 'exposure.bias');
  expect(bias?.value).toBeCloseTo(-0.5, 1);

  const names = analysis.pictures.map(({ name }) => name);
  expect(names).toEqual(expect.arrayContaining(['thumb', 'view', 'crop-C', 'crop-NE']));
  for (const picture of analysis.pictures) {
    const stored = await getBytes(picture.key);
    expect(createHash('sha256').update(stored).digest('hex')).toBe(picture.sha256);
    const seen = await sharp(stored).metadata();
    expect(seen).toMatchObject({ width: picture.width, height: picture.height });
    expect([seen.exif, seen.xmp, seen.iptc]).toEqual([undefined, undefined, undefined]);
    expect(Buffer.from(stored).includes('secret-serial')).toBe(false);
  }
});

test('a 100 % crop shows the original’s own pixels round the station, at most 3 codes off after JPEG', async () => {
  const { bytes } = await renderScene({ width: 1200, height: 900, format: { type: 'png' } });
  const shot = await settled(await drop(bytes, 'IMG_2.PNG'));
  const crop = shot.latestAnalysis?.pictures.find(({ name }) => name === 'crop-C');
  const station = shot.latestAnalysis?.plots.stations?.find(({ id }) => id === 'C');
  if (!crop || !station) throw new Error('no crop of the centre');
  const left = Math.round(station.x - crop.width / 2);
  const top = Math.round(station.y - crop.height / 2);
  const area = { left, top, width: crop.width, height: crop.height };
  const [original, derived] = await Promise.all([
    sharp(bytes).extract(area).removeAlpha().raw().toBuffer(),
    sharp(await getBytes(crop.key))
      .raw()
      .toBuffer(),
  ]);
  expect(derived.length).toBe(original.length);
  let sum = 0;
  for (const [i, code] of original.entries()) sum += Math.abs(code - (derived[i] ?? 0));
  expect(sum / original.length).toBeLessThan(3);
});

test('a broken photograph fails with a sentence, at the first attempt', async () => {
  const { bytes } = await renderScene({ width: 800, height: 600 });
  const shot = await settled(await drop(bytes.subarray(0, 3000), 'IMG_3.JPG'));
  expect(shot.state).toBe('failed');
  expect(shot.error).toMatch(/^[A-Z].{20,}\.$/s);
  const job = await db().Job.findOne({ where: { subjectId: shot.id } });
  expect(job).toMatchObject({ state: 'done', attempts: 1 });
});

test('analysing again keeps the earlier analysis and points to the new one', async () => {
  const shot = await db().Shot.findOne({
    where: { ...owners, name: 'IMG_1.JPG' },
    rejectOnEmpty: true,
  });
  const first = shot.latestAnalysisId;
  await db().sequelize.transaction(async (transaction) => {
    await shot.update({ state: 'queued' }, { transaction });
    await enqueue(transaction, { kind, subjectId: shot.id });
  });
  const again = await settled(shot.id);
  expect(again.latestAnalysisId).not.toBe(first);
  expect(await db().Analysis.count({ where: { shotId: shot.id } })).toBe(2);
});
