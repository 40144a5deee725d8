import { describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import type { MeasurementError } from '@/analysis/errors';
import type { TonePoint } from '@/analysis/exposure/lent-tone';
import { type FlatPlan, renderFlat, renderFree, renderGrey } from '@/fixtures/scene/flat';
import { createTone, encodeSrgb } from '@/fixtures/scene/light';

const size = { width: 1200, height: 900 };

async function measure(plan: FlatPlan, tone?: readonly TonePoint[], render = renderGrey) {
  const { bytes, truth } = await render({ ...size, snrDb: 36, ...plan });
  const analysis = await analyseBytes(bytes, { kind: 'grey', ...(tone ? { tone } : {}) });
  const find = (name: string) => analysis.metrics.find((m) => m.name === name)!;
  return { analysis, truth, find };
}

/** Greys of a target shot taken `ev` stops brighter than right, with the planted tone curve. */
function lend(contrast: number, ev = 0): TonePoint[] {
  const tone = createTone(contrast);
  return [0.03, 0.05, 0.08, 0.12, 0.18, 0.25, 0.34, 0.45, 0.6, 0.75].map((reflectance) => ({
    reflectance,
    code: encodeSrgb(tone.apply(reflectance * 2 ** ev)),
  }));
}

describe('exposure of a grey card', () => {
  // Truth by construction; limit 0.02 EV (measurements.md, exposure.bias).
  test.each([
    { exposureEv: 0, toneContrast: 1.3, shot: 0 },
    { exposureEv: -1.2, toneContrast: 1.4, shot: -0.4 },
    { exposureEv: 0.8, toneContrast: 0.8, shot: 0.5 },
    { exposureEv: -0.6, toneContrast: 1, shot: 0 },
  ])(
    'through the target shot’s tone response is right to 0.02 EV: %j',
    async ({ shot, ...plan }) => {
      const { find, truth, analysis } = await measure(
        { ...plan, shadingCornerEv: -0.8 },
        lend(plan.toneContrast, shot),
      );
      expect(Math.abs(find('exposure.bias').value - truth.exposureBias)).toBeLessThan(0.02);
      expect(analysis.warnings.map(({ code }) => code)).not.toContain('tone-assumed');
    },
  );

  test.each([0.8, 1, 1.25])(
    'without one, the sRGB curve is assumed, said, and its doubt covers contrast %d',
    async (toneContrast) => {
      const { find, truth, analysis } = await measure({ exposureEv: -1, toneContrast });
      const { value, uncertainty } = find('exposure.bias');
      expect(Math.abs(value - truth.exposureBias)).toBeLessThan(2 * uncertainty);
      expect(analysis.warnings.map(({ code }) => code)).toContain('tone-assumed');
    },
  );

  // Truth: the bias is what the photographer dialled in, and the meter's own error is nought.
  test('of an automatic camera takes the compensation out; of a manual one there is no meter error', async () => {
    const exif = { make: 'Aster', exposureBias: -0.7, program: 2 };
    const auto = await measure({ exposureEv: -0.7, exif }, undefined, renderFlat);
    expect(auto.find('exposure.meterBias').value).toBeCloseTo(auto.truth.exposureBias + 0.7, 1);
    const manual = await measure({ exif: { ...exif, program: 1 } });
    expect(manual.find('exposure.meterBias')).toBeUndefined();
  });
});

describe('white balance and noise of a grey card', () => {
  // Truth: truth.ts works out a* and b* of mid grey on its own.
  test.each([
    [1.06, 1, 0.95],
    [0.93, 1, 1.05],
    [1, 1, 1],
  ] as const)('gains %d, %d, %d come back in a* and b*', async (...whiteGains) => {
    const { find, truth } = await measure({ whiteGains, format: { type: 'png' } });
    expect(Math.abs(find('white.a').value - truth.whiteA)).toBeLessThan(0.3);
    expect(Math.abs(find('white.b').value - truth.whiteB)).toBeLessThan(0.3);
  });

  // Truth by construction; limit 0.5 dB on PNG (measurements.md, noise.snr).
  test.each([22, 30, 38])(
    'a signal to noise ratio of %d dB comes back within 0.5 dB',
    async (snrDb) => {
      const { find, truth } = await measure({ snrDb, format: { type: 'png' } });
      expect(Math.abs(find('noise.snr').value - truth.snrDb)).toBeLessThan(0.5);
    },
  );
});

describe('refusals', () => {
  const codeOf = async (bytes: Buffer) => {
    const outcome = await analyseBytes(bytes, { kind: 'grey' }).catch((e: unknown) => e);
    return (outcome as MeasurementError).code;
  };
  test('a still life is no card', async () => {
    expect(await codeOf((await renderFree(size)).bytes)).toBe('not-a-card');
  });
  test('a white card burnt out is told as clipped', async () => {
    expect(await codeOf((await renderGrey({ ...size, exposureEv: 3 })).bytes)).toBe('card-clipped');
  });
  test('a card seen from afar is too small', async () => {
    expect(await codeOf((await renderGrey({ ...size, fill: 0.2 })).bytes)).toBe('not-a-card');
  });
});
