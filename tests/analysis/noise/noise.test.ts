import { expect, test } from 'vitest';
import { measureNoise } from '@/analysis/noise/measure-noise';
import checks from '@/fixtures/check-values/noise-checks.json';
import { renderScene } from '@/fixtures/scene/render';
import { decodeFrame, frameOf, truthRegistration } from '../sharpness/truth-registration';

const side = { width: 1000, height: 750 };
const truth = {
  ...side,
  toImage: (x: number, y: number): [number, number] => [500 + 0.8 * x, 375 + 0.8 * y],
};

/** A plain frame with a gradient; Gaussian noise of the given ratio by Box and Muller's method. */
function noisyFrame(ratio: number) {
  const data = new Uint16Array(side.width * side.height * 3);
  let state = 12345;
  const random = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return (state + 0.5) / 2 ** 32;
  };
  for (let i = 0; i < side.width * side.height; i++) {
    const light = 0.18 * (1 + 0.1 * ((i % side.width) / side.width - 0.5));
    const noise =
      (light / ratio) * Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random());
    data.fill(Math.round(65535 * (light + noise)), 3 * i, 3 * i + 3);
  }
  const table = Float32Array.from({ length: 65536 }, (_, code) => code / 65535);
  return { ...frameOf(side.width, side.height, data), toLinear: [table, table, table] as const };
}

// Truth by construction; dB of a ratio: check-values noise_checks (20 log10).
test.each(checks.values.snr_db.filter((c) => c.ratio >= 10 && c.ratio <= 100))(
  'signal over noise of $ratio on a gradient is $db dB',
  ({ ratio, db }) => {
    const { metrics } = measureNoise(noisyFrame(ratio), truthRegistration(truth));
    expect(metrics[0]!.name).toBe('noise.snr');
    expect(Math.abs(metrics[0]!.value - db)).toBeLessThan(0.3);
    expect(metrics[0]!.uncertainty).toBeLessThan(0.3);
  },
);

// Truth: planted by the renderer, before rounding to codes; limit: measurements.md, 0.5 dB from 20 to 40 dB on PNG.
test.each([20, 30, 40])('a shaded photograph of %d dB, to 0.5 dB', async (snrDb) => {
  const { bytes, truth: planted } = await renderScene({
    width: 1200,
    height: 900,
    snrDb,
    shadingCornerEv: -1,
    format: { type: 'png' },
  });
  const { metrics } = measureNoise(await decodeFrame(bytes), truthRegistration(planted));
  expect(Math.abs(metrics[0]!.value - planted.snrDb)).toBeLessThan(0.5);
});

// A twelfth of a squared code (Widrow & Kollár, from memory): at mid grey, 8 bits, about 48 dB in luminance.
test('noise fainter than the rounding is told as the most it can be, with doubt', async () => {
  const { bytes, truth: planted } = await renderScene({
    width: 1000,
    height: 750,
    snrDb: 54,
    format: { type: 'png' },
  });
  const { metrics } = measureNoise(await decodeFrame(bytes), truthRegistration(planted));
  const { value, uncertainty } = metrics[0]!;
  expect(value).toBeLessThan(planted.snrDb);
  expect(Math.abs(value - planted.snrDb)).toBeLessThan(3 * uncertainty);
  expect(uncertainty).toBeGreaterThan(2);
});

test('a clipped background gives a warning in place of a number', () => {
  const data = new Uint8Array(side.width * side.height * 3).fill(255);
  const frame = frameOf(side.width, side.height, data);
  const { metrics, warnings } = measureNoise(frame, truthRegistration(truth));
  expect(metrics).toEqual([]);
  expect(warnings[0]!.code).toBe('noise-spots');
});
