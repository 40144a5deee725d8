import { describe, expect, test } from 'vitest';
import { measureColour } from '@/analysis/colour/measure-colour';
import { decode } from '@/analysis/decode';
import { measureExposure } from '@/analysis/exposure/measure-exposure';
import { measureFrame } from '@/analysis/exposure/measure-frame';
import { sampleDiscs } from '@/analysis/exposure/sample-discs';
import { measureTone } from '@/analysis/exposure/tone';
import type { ScenePlan } from '@/fixtures/scene/plan';
import { renderScene } from '@/fixtures/scene/render';
import { plantedRegistration } from '../planted-registration';

/** Exposure, tone and colour of a rendered scene, the geometry known, so that nothing else can be at fault. */
async function measure(plan: ScenePlan) {
  const { bytes, truth } = await renderScene({ width: 960, height: 720, ...plan });
  const { frame, capture } = await decode(bytes);
  const registration = plantedRegistration(truth, plan.target);
  const samples = sampleDiscs(frame, registration);
  const tone = measureTone(frame, samples);
  if (!tone) throw new Error('no tone response');
  const { meanReflectance } = registration.target;
  const exposure = measureExposure(tone, measureFrame(frame), capture, meanReflectance);
  const colour = measureColour(frame, samples, tone);
  const metrics = new Map([...exposure.metrics, ...colour.metrics].map((m) => [m.name, m]));
  const value = (name: string) => metrics.get(name)?.value ?? Number.NaN;
  return {
    truth,
    tone,
    frame,
    metrics,
    value,
    warnings: [...exposure.warnings, ...colour.warnings],
  };
}

const png = { type: 'png' } as const;

// The error allowed for exposure.bias is 0.02 EV, for colour.saturation 1.0 % (measurements of the project).
describe('planted exposure comes back', () => {
  test.each([
    [-2, 1, 'jpeg'],
    [-1.3, 1.4, 'jpeg'],
    [-0.7, 0.8, 'png'],
    [0, 1, 'png'],
    [0.5, 1.2, 'jpeg'],
    [1, 0.8, 'jpeg'],
    [1, 1.4, 'png'],
  ])('%f EV at tone contrast %f as %s', async (exposureEv, toneContrast, type) => {
    const format =
      type === 'png' ? png : ({ type: 'jpeg', quality: 85, subsampling: '4:2:0' } as const);
    const { truth, value, tone } = await measure({
      exposureEv,
      toneContrast,
      snrDb: 32,
      format,
      seed: 3,
    });
    expect(Math.abs(value('exposure.bias') - truth.exposureBias)).toBeLessThan(0.02);
    if (exposureEv < 0.5) expect(Math.abs(tone.contrast - truth.toneContrast)).toBeLessThan(0.015);
  });

  test('the tone response turns codes back into reflectance', async () => {
    const { tone, frame, truth } = await measure({
      toneContrast: 1.3,
      exposureEv: -0.5,
      format: png,
      snrDb: 36,
    });
    for (const disc of ['grey-03', 'grey-06', 'grey-09', 'grey-11']) {
      const code = truth.discCodes[disc]![1] * 255;
      const [below, above] = [
        tone.toLight[1][Math.floor(code)]!,
        tone.toLight[1][Math.ceil(code)]!,
      ];
      const light = below + (above - below) * (code % 1);
      const { reflectance } = plantedRegistration(truth).target.discs.find((d) => d.id === disc)!;
      expect(Math.abs(Math.log2(light / reflectance!))).toBeLessThan(0.02);
    }
    for (const table of tone.toLight) {
      expect(table).toHaveLength(frame.maxCode + 1);
      expect(table[0]).toBe(0);
      expect(table.every((light, i) => i === 0 || light >= table[i - 1]!)).toBe(true);
    }
  });
});

describe('the meter’s own error', () => {
  const exif = { make: 'Aster', exposureTime: 1 / 125, fNumber: 5.6, iso: 100 };
  test('is the bias less compensation and less what the field’s mean reflectance asks', async () => {
    const { value } = await measure({
      exposureEv: -0.7,
      exif: { ...exif, program: 2, exposureBias: -0.5 },
    });
    // log2(0.18 / 0.20541) = −0.19: an averaging meter darkens a field lighter than mid grey.
    expect(value('exposure.meterBias')).toBeCloseTo(value('exposure.bias') + 0.5 + 0.1905, 3);
  });
  test('is not told of a manual exposure', async () => {
    const { metrics } = await measure({ exif: { ...exif, program: 1 } });
    expect(metrics.has('exposure.meterBias')).toBe(false);
  });
});

describe('planted colour comes back', () => {
  test.each([
    [0.7, 1, [1, 1, 1]],
    [1, 1, [1.08, 1, 0.92]],
    [0.9, 1.2, [0.95, 1, 1.06]],
  ] as [number, number, [number, number, number]][])(
    'saturation %f, contrast %f, gains %j',
    async (saturation, toneContrast, whiteGains) => {
      const plan = {
        saturation,
        toneContrast,
        whiteGains,
        exposureEv: -0.4,
        snrDb: 36,
        format: png,
      };
      const { truth, value, warnings } = await measure(plan);
      expect(warnings).toEqual([]);
      expect(Math.abs(value('colour.saturation') - truth.saturation)).toBeLessThan(0.5);
      expect(Math.abs(value('colour.hue') - truth.hue)).toBeLessThan(0.3);
      expect(Math.abs(value('white.a') - truth.whiteA)).toBeLessThan(0.4);
      expect(Math.abs(value('white.b') - truth.whiteB)).toBeLessThan(0.4);
      expect(value('white.error')).toBeCloseTo(Math.hypot(value('white.a'), value('white.b')), 6);
    },
  );

  test('a faithful picture has almost no error, and 3 × 3 leaves no more', async () => {
    const { value } = await measure({ snrDb: 40, format: { type: 'png', depth: 16 } });
    expect(value('colour.error')).toBeLessThan(0.3);
    expect(value('colour.correctable')).toBeLessThanOrEqual(value('colour.error') + 0.01);
    expect(value('colour.errorMax')).toBeGreaterThanOrEqual(value('colour.error'));
  });

  test('what a 3 × 3 matrix did, a 3 × 3 matrix undoes: desaturated colours are correctable', async () => {
    const { value } = await measure({ saturation: 0.7, snrDb: 40, format: png });
    expect(value('colour.error')).toBeGreaterThan(2);
    expect(value('colour.correctable')).toBeLessThan(0.5);
  });

  test('an exposure error is no colour error', async () => {
    const even = await measure({ snrDb: 40, format: png });
    const dark = await measure({ snrDb: 40, exposureEv: -1, format: png });
    expect(Math.abs(dark.value('colour.error') - even.value('colour.error'))).toBeLessThan(0.4);
  });

  test('clipped discs are named and left out', async () => {
    const { warnings, truth } = await measure({
      saturation: 1.35,
      exposureEv: 0.5,
      format: png,
      snrDb: 36,
    });
    const clipped = truth.clippedDiscs.filter((id) => !id.startsWith('grey'));
    expect(clipped.length).toBeGreaterThan(1);
    const warning = warnings.find((w) => w.code === 'discs-clipped');
    for (const id of clipped) expect(warning?.message).toContain(id);
  });

  test('a black-and-white picture is told', async () => {
    const { warnings } = await measure({ saturation: 0, format: png, snrDb: 36 });
    expect(warnings.map((w) => w.code)).toContain('no-colour');
  });
});
