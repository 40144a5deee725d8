import { createHash, randomBytes } from 'node:crypto';
import { encode } from 'next-auth/jwt';
import sharp from 'sharp';
import type { Analysis as Result } from '@/analysis/result';
import { db } from '@/lib/server/db';
import { env } from '@/lib/server/env';
import { hashPassword } from '@/lib/server/passwords';
import { cookieName } from '@/lib/server/session';
import { derivedKey, putBytes } from '@/lib/server/storage';
import type { Actor } from '@/lib/shared/api';
import type { UnitInput } from '@/lib/shared/schemas';
import type { Role } from '@/lib/shared/words';
import { newId } from '@/models/id';
import type { DerivedPicture } from '@/models/testing';

/** People, units and results that the database tests begin from; every name is invented and new each time. */
export const password = 'a long enough password';
let hashed: Promise<string> | undefined;

export async function makeShop(name = `Shop ${newId().slice(-6)}`) {
  const shop = await db().Shop.create({ name, currency: 'EUR' });
  return shop;
}

export async function makeMember(shop: { id: string; name: string }, role: Role): Promise<Actor> {
  hashed ??= hashPassword(password);
  const tail = newId().slice(-8);
  const user = await db().User.create({
    email: `${role}-${tail}@example.org`,
    name: `${role} ${tail}`,
    passwordHash: await hashed,
  });
  await db().Membership.create({ shopId: shop.id, userId: user.id, role });
  const session = await db().Session.create({
    userId: user.id,
    shopId: shop.id,
    userAgent: 'test',
    expiresAt: new Date(Date.now() + 3_600_000),
  });
  return {
    userId: user.id,
    sessionId: session.id,
    shopId: shop.id,
    shopName: shop.name,
    currency: 'EUR',
    role,
    name: user.name,
    email: user.email,
  };
}

/** A shop with one person of each role. */
export async function makeHouse() {
  const shop = await makeShop();
  const [owner, refurbisher, grader] = await Promise.all([
    makeMember(shop, 'owner'),
    makeMember(shop, 'refurbisher'),
    makeMember(shop, 'grader'),
  ]);
  return { shop, owner, refurbisher, grader };
}

/** The cookie that next-auth gives a signed-in browser. */
export async function cookieOf(actor: Actor): Promise<string> {
  const token = await encode({ token: { sessionId: actor.sessionId }, secret: env().AUTH_SECRET });
  return `${cookieName()}=${token}`;
}

export const unitInput = (over: Partial<UnitInput> = {}) => ({
  maker: 'Halvard Optik',
  model: 'P5',
  modelClass: 'small-sensor-compact' as const,
  serial: `HX${newId().slice(-10).toUpperCase()}`,
  fault: 'Display dark',
  priceMinor: 2500,
  accessories: [],
  ...over,
});

/** Real bytes of a small photograph, no two alike. */
export async function photograph(width = 64, height = 48): Promise<Uint8Array<ArrayBuffer>> {
  const raw = { width, height, channels: 3 as const };
  const jpeg = await sharp(randomBytes(width * height * 3), { raw })
    .withExif({ IFD0: { Make: 'Halvard Optik' }, IFD3: { GPSLatitude: '54/1 30/1 0/1' } })
    .jpeg({ quality: 92 })
    .toBuffer();
  return new Uint8Array(jpeg);
}

export const sha256Of = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');

/** Results of a sound camera, as the measuring code lays them out. */
export const soundMetrics = (over: Record<string, number> = {}): Result['metrics'] => {
  const metric = (name: string, value: number, unit: string, zone?: string) => ({
    name,
    value: over[name] ?? value,
    unit,
    uncertainty: 0.004,
    ...(zone && { zone }),
  });
  return [
    metric('exposure.bias', 0.05, 'EV'),
    metric('clip.highlights', 0.2, '%'),
    metric('colour.error', 3.1, 'ΔE00'),
    metric('colour.saturation', 108, '%'),
    metric('white.error', 2, 'ΔC*ab'),
    metric('sharpness.mtf50', 0.27, 'cy/px', 'centre'),
    metric('sharpness.cornerRatio', 78, '%'),
    metric('sharpness.asymmetry', 9, '%'),
    metric('fringe.red', 0.6, 'px', 'corners'),
    metric('fringe.blue', -0.5, 'px', 'corners'),
    metric('fringe.shift', 0.08, 'px'),
    metric('noise.snr', 37, 'dB'),
    metric('shading.corner', -0.6, 'EV'),
    metric('shading.asymmetry', 0.1, 'EV'),
    metric('distortion.corner', -1.2, '%'),
  ];
};

const station = (id: string, x: number, y: number, mtf50: number) => ({
  id,
  x,
  y,
  radius: 60,
  corners: [],
  curves: [
    { edge: 'vertical' as const, frequency: [0, 0.25, 0.5], response: [1, 0.5, 0.1] },
    { edge: 'horizontal' as const, frequency: [0, 0.25, 0.5], response: [1, 0.7, 0.3] },
  ],
  mtf50,
  red: { x: 0.5, y: 0.1 },
  blue: { x: -0.4, y: 0 },
});

/** Writes what the worker writes for an analysed target photograph, pictures included. */
export async function plantAnalysis(shotId: string, over: Record<string, number> = {}) {
  const shot = await db().Shot.findByPk(shotId, {
    include: [{ association: 'run', include: ['unit'] }],
    rejectOnEmpty: true,
  });
  const unit = shot.run?.unit;
  if (!unit) throw new Error('The shot has no unit.');
  const id = newId();
  const metrics = soundMetrics(over);
  const { shopId } = shot;
  await db().Analysis.create({
    id,
    shopId,
    shotId,
    version: '1',
    kind: 'target',
    width: 2000,
    height: 1500,
    capture: { ...emptyCapture, exposureTime: 1 / 60, fNumber: 2.8, iso: 80, focalLength: 6.2 },
    registration: { target: '4x3', residual: 0.1, rotation: 0, coverage: 0.9, rings: {} },
    metrics,
    warnings: [],
    milliseconds: { decode: 1, register: 1, measure: 1, total: 3 },
    plots: {
      histogram: Array.from({ length: 64 }, () => 1 / 64),
      histogramByChannel: { red: [], green: [], blue: [] },
      stations: [
        station('C', 1000, 750, 0.27),
        station('NW', 100, 100, 0.2),
        station('SE', 1900, 1400, 0.18),
      ],
      tone: [{ id: 'grey-1', reflectance: 0.18, code: 0.46, used: true }],
      colours: [],
    },
    pictures: await plantPictures(shopId, id),
  });
  await db().Measurement.bulkCreate(
    metrics.map(({ name, zone, value, unit: of, uncertainty }) => ({
      shopId,
      analysisId: id,
      modelId: unit.modelId,
      unitId: unit.id,
      name,
      zone: zone ?? '',
      value,
      unit: of,
      uncertainty,
    })),
  );
  await shot.update({
    state: 'done',
    kind: 'target',
    progress: 1,
    latestAnalysisId: id,
    changedAt: new Date(),
  });
  await db().Job.update({ state: 'done', pendingKey: null }, { where: { subjectId: shotId } });
  return id;
}

let planted: ReturnType<typeof photograph> | undefined;

/** With metadata left in on purpose: what is published must not carry it. */
async function plantPictures(shopId: string, analysisId: string): Promise<DerivedPicture[]> {
  const names = ['thumb', 'view', 'crop-C', 'crop-SE', 'crop-NW'];
  return Promise.all(
    names.map(async (name) => {
      planted ??= photograph();
      const bytes = await planted;
      const key = derivedKey(shopId, analysisId, name);
      await putBytes(key, bytes, 'image/jpeg');
      const crop = name.startsWith('crop-') ? { station: name.slice(5) } : {};
      return {
        name,
        key,
        mediaType: 'image/jpeg',
        bytes: bytes.length,
        sha256: sha256Of(bytes),
        width: 64,
        height: 48,
        ...crop,
      };
    }),
  );
}

const emptyCapture: Result['capture'] = {
  make: null,
  model: null,
  serial: null,
  exposureTime: null,
  fNumber: null,
  iso: null,
  exposureBias: null,
  focalLength: null,
  takenAt: null,
  program: null,
  flash: null,
  software: null,
};

/** A request as a browser of this person sends it. */
export async function requestOf(
  actor: Actor | null,
  method: string,
  path: string,
  body?: unknown,
): Promise<Request> {
  const headers = new Headers({ 'sec-fetch-site': 'same-origin' });
  if (actor) headers.set('cookie', await cookieOf(actor));
  const init: RequestInit = { method, headers };
  if (body instanceof Uint8Array) Object.assign(init, { body });
  else if (body !== undefined) Object.assign(init, { body: JSON.stringify(body) });
  return new Request(`http://localhost:3000${path}`, init);
}
