import sharp from 'sharp';
import { beforeAll, describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { MeasurementError } from '@/analysis/errors';
import { quantities } from '@/analysis/quantities';
import type { Analysis } from '@/analysis/result';
import { renderScene } from '@/fixtures/scene/render';
import type { SceneTruth } from '@/fixtures/scene/truth';

let bytes: Buffer;
let truth: SceneTruth;
let analysis: Analysis;

beforeAll(async () => {
  const rendered = await renderScene({
    width: 1200,
    height: 900,
    fill: 0.9,
    rotationDegrees: 2,
    exposureEv: -0.6,
    toneContrast: 1.15,
    shadingCornerEv: -0.5,
    distortionCornerPercent: -1.5,
    snrDb: 34,
    exif: {
      make: 'Aster',
      model: 'A-40',
      exposureTime: 1 / 125,
      fNumber: 5.6,
      iso: 100,
      program: 2,
    },
  });
  bytes = rendered.bytes;
  truth = rendered.truth;
  analysis = await analyseBytes(bytes);
}, 120_000);

const value = (name: string) =>
  analysis.metrics.find((m) => m.name === name && !m.zone)?.value ?? Number.NaN;

describe('a photograph of the target', () => {
  test('is known as one and registered', () => {
    expect(analysis.kind).toBe('target');
    expect(analysis.registration?.target).toBe('4x3');
    for (const [id, [x, y]] of Object.entries(truth.rings)) {
      const found = analysis.registration!.rings[id]!;
      expect(Math.hypot(found[0] - x, found[1] - y)).toBeLessThan(0.3);
    }
  });

  test('gives the whole frame’s quantities near what was planted', () => {
    expect(Math.abs(value('exposure.bias') - truth.exposureBias)).toBeLessThan(0.02);
    expect(Math.abs(value('colour.saturation') - truth.saturation)).toBeLessThan(1);
    expect(Math.abs(value('shading.corner') - truth.shadingCorner)).toBeLessThan(0.03);
    expect(Math.abs(value('distortion.corner') - truth.distortionCorner)).toBeLessThan(0.1);
  });

  test('gives every quantity the table names, in its unit, finite, with an uncertainty', () => {
    for (const { name, value: v, unit, uncertainty } of analysis.metrics) {
      expect(quantities.get(name)?.unit, name).toBe(unit);
      expect(Number.isFinite(v) && Number.isFinite(uncertainty) && uncertainty >= 0, name).toBe(
        true,
      );
    }
    const names = new Set(analysis.metrics.map((m) => m.name));
    // Given as fields of fringe.red, fringe.blue and sharpness.mtf50, not as metrics of their own.
    const fields = ['fringe.redTangential', 'fringe.blueTangential', 'sharpness.lwph'];
    // Quantities of other kinds of photograph.
    const others = /^(dust|dark|scene|ladder|lag)\./;
    const missing = [...quantities.keys()].filter(
      (name) => !names.has(name) && !fields.includes(name) && !others.test(name),
    );
    expect(missing).toEqual([]);
  });

  test('names no quantity twice at one place', () => {
    const keys = analysis.metrics.map((m) => `${m.name} ${m.zone} ${m.edge}`);
    expect(new Set(keys).size).toBe(keys.length);
  });

  test('brings what the drawings need', () => {
    const { plots } = analysis;
    expect(plots.stations).toHaveLength(13);
    expect(plots.tone).toHaveLength(12);
    expect(plots.colours).toHaveLength(36);
    expect(plots.discs).toHaveLength(36);
    expect(plots.outline).toHaveLength(40);
    expect(plots.histogram).toHaveLength(64);
  });

  test('comes to the same numbers twice', async () => {
    const again = await analyseBytes(bytes);
    expect(again.metrics).toEqual(analysis.metrics);
  });
});

describe('other pictures', () => {
  const plain = () =>
    sharp({ create: { width: 320, height: 240, channels: 3, background: '#708090' } })
      .png()
      .toBuffer();

  test('without a target are measured as scenes, and told so', async () => {
    const scene = await analyseBytes(await plain());
    expect(scene.kind).toBe('scene');
    expect(scene.registration).toBeUndefined();
    // A plain colour has no edges to tell sharpness and fringes from.
    expect(scene.metrics.map((m) => m.name)).toEqual([
      'scene.chroma',
      'exposure.median',
      'clip.highlights',
      'clip.shadows',
    ]);
    expect(scene.warnings.map((w) => w.code)).toEqual(
      expect.arrayContaining(['no-target', 'tone-assumed', 'no-exif']),
    );
  });

  test('are refused where a target was promised', async () => {
    const outcome = await analyseBytes(await plain(), { kind: 'target' }).catch((e: unknown) => e);
    expect(outcome).toBeInstanceOf(MeasurementError);
    expect((outcome as MeasurementError).code).toBe('target-not-found');
  });

  test('a target is measured as a scene on request', async () => {
    const scene = await analyseBytes(bytes, { kind: 'scene' });
    expect(scene.kind).toBe('scene');
    expect(scene.warnings.map((w) => w.code)).not.toContain('no-target');
  });

  test.each([
    ['dark', 'not-dark'],
    ['flat', 'not-flat'],
    ['grey', 'not-a-card'],
  ] as const)('a target taken for kind %s is refused as %s', async (kind, code) => {
    const outcome = await analyseBytes(bytes, { kind }).catch((e: unknown) => e);
    expect((outcome as MeasurementError).code).toBe(code);
  });
});
