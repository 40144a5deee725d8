import { describe, expect, test } from 'vitest';
import { measureShading } from '@/analysis/field/measure-shading';
import checks from '@/fixtures/check-values/shading-checks.json';
import { frameOf, lightOfContrast, truthRegistration } from '../sharpness/truth-registration';

const side = { width: 1000, height: 750 };
const truth = (fill: number) => ({
  ...side,
  toImage: (x: number, y: number): [number, number] => {
    const scale = (fill * side.height) / 900;
    return [500 + scale * x, 375 + scale * y];
  },
});

/** A plain frame whose light is a function of the position, ±1 at the frame's edges; sRGB codes of 8 bits. */
function litFrame(lightAt: (x: number, y: number) => number, contrast = 1) {
  const data = new Uint8Array(side.width * side.height * 3);
  for (let row = 0; row < side.height; row++)
    for (let col = 0; col < side.width; col++) {
      const x = (2 * (col + 0.5)) / side.width - 1;
      const y = (2 * (row + 0.5)) / side.height - 1;
      const light = 0.18 * lightAt(x, y) ** contrast;
      const code = light <= 0.0031308 ? 12.92 * light : 1.055 * light ** (1 / 2.4) - 0.055;
      // Ordered rounding stands in for noise.
      const dither = ((col * 7 + row * 3) % 8) / 8;
      const at = (row * side.width + col) * 3;
      data.fill(Math.min(255, Math.floor(255 * code + dither)), at, at + 3);
    }
  return frameOf(side.width, side.height, data);
}

/** Squared image height from a position of ±1 at the frame's edges. */
const square = (x: number, y: number) => (16 * x * x + 9 * y * y) / 25;

// Truth: the cos⁴ law, check-values shading_checks; limit: measurements.md, 0.03 EV.
describe('light that falls with cos⁴', () => {
  const cases = checks.values.cos4.filter((c) => c.half_field_deg <= 35);
  test.each(cases)('half field $half_field_deg°: the corners are $ev EV darker', (c) => {
    const steep = Math.tan((c.half_field_deg * Math.PI) / 180) ** 2;
    const frame = litFrame((x, y) => (1 + steep * square(x, y)) ** -2);
    const { metrics, correctionAt } = measureShading(frame, truthRegistration(truth(0.95)));
    const corner = metrics.find((m) => m.name === 'shading.corner' && m.zone === undefined)!;
    expect(Math.abs(corner.value + c.ev)).toBeLessThan(0.03);
    expect(Math.abs(corner.value + c.ev)).toBeLessThan(2 * corner.uncertainty);
    expect(correctionAt(500, 375)).toBeCloseTo(1, 9);
    // A third of the way out along the diagonal.
    expect(correctionAt(500 + 500 / 3, 375 + 125)).toBeCloseTo((1 + steep / 9) ** -2, 2);
  });
});

test('the tone response turns codes of a contrasty camera back to light', () => {
  const frame = litFrame((x, y) => 2 ** -square(x, y), 1.4);
  const registration = truthRegistration(truth(0.95));
  const through = measureShading(frame, registration, lightOfContrast(1.4)).metrics;
  const value = through.find((m) => m.zone === 'NW')!.value;
  expect(Math.abs(value + 1)).toBeLessThan(0.03);
  const without = measureShading(frame, registration).metrics.find((m) => m.zone === 'NW')!.value;
  expect(without).toBeLessThan(-1.3);
});

test('light from one side is the spread of the corners and leaves their mean alone', () => {
  const frame = litFrame((x) => 2 ** (0.2 * x));
  const { metrics, plot } = measureShading(frame, truthRegistration(truth(0.9)));
  expect(Math.abs(metrics.find((m) => m.name === 'shading.asymmetry')!.value - 0.4)).toBeLessThan(
    0.03,
  );
  const mean = metrics.find((m) => m.name === 'shading.corner' && m.zone === undefined)!;
  expect(Math.abs(mean.value)).toBeLessThan(0.03);
  expect(plot!.ev).toHaveLength(plot!.columns * plot!.rows);
});

test('a target that fills less of the frame leaves the corners more doubtful', () => {
  const frame = litFrame(() => 1);
  const doubt = (fill: number) =>
    measureShading(frame, truthRegistration(truth(fill))).metrics.find((m) => m.zone === 'SE')!
      .uncertainty;
  expect(doubt(0.6)).toBeGreaterThan(2 * doubt(0.95));
});

test('a clipped background gives a warning and no correction', () => {
  const frame = litFrame(() => 8);
  const result = measureShading(frame, truthRegistration(truth(0.9)));
  expect(result.metrics).toEqual([]);
  expect(result.warnings[0]!.code).toBe('shading-spots');
  expect(result.correctionAt(0, 0)).toBe(1);
});
