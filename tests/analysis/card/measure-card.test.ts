import { describe, expect, test } from 'vitest';
import { card24, createCard } from '@/analysis/card/card';
import { measureCard } from '@/analysis/card/measure-card';
import { MeasurementError } from '@/analysis/errors';
import type { Frame, Point } from '@/analysis/image';
import published from '@/fixtures/check-values/colour-target-24-patch.json';
import { frameOf } from '../sharpness/truth-registration';

/** The card painted from its published linear sRGB, outer corners of the grid at the given place, `pitch` px. */
function paintCard(
  values: readonly { srgb_linear: number[] }[],
  { pitch = 40, gain = [1, 1, 1], desaturate = 1, depth = 65535 } = {},
): { frame: Frame; corners: Point[] } {
  const gap = 0.13;
  const [left, top] = [30, 24];
  const [width, height] = [6 * pitch + 60, 4 * pitch + 48];
  const data = new Uint16Array(width * height * 3).fill(Math.round(0.1 * depth));
  const encode = (v: number) => (v <= 0.0031308 ? 12.92 * v : 1.055 * v ** (1 / 2.4) - 0.055);
  values.forEach(({ srgb_linear: rgb }, i) => {
    const y = 0.2126 * rgb[0]! + 0.7152 * rgb[1]! + 0.0722 * rgb[2]!;
    const [x0, y0] = [left + (i % 6) * pitch, top + Math.floor(i / 6) * pitch];
    for (let dy = 0; dy < pitch * (1 - gap); dy++)
      for (let dx = 0; dx < pitch * (1 - gap); dx++)
        rgb.forEach((v, c) => {
          const light = gain[c]! * Math.max(0, y + desaturate * (v - y));
          const at = ((y0 + dy) * width + x0 + dx) * 3 + c;
          data[at] = Math.round(depth * encode(Math.min(1, light)));
        });
  });
  const [right, bottom] = [left + (6 - gap) * pitch, top + (4 - gap) * pitch];
  const corners = [
    { x: left, y: top },
    { x: right, y: top },
    { x: right, y: bottom },
    { x: left, y: bottom },
  ];
  return { frame: frameOf(width, height, data), corners };
}

const values = published.values.after_nov_2014;
const card = card24('after-november-2014');
const of = (result: ReturnType<typeof measureCard>, name: string) =>
  result.metrics.find((m) => m.name === name)!.value;

describe('the 24-patch card', () => {
  test('has the published values of both formulations, whose patches differ by 0.85 and 1.95 CIEDE2000', () => {
    expect(card.patches.map(({ lab }) => lab)).toEqual(values.map((v) => v.Lab_D50));
    const before = card24('before-november-2014');
    expect(before.patches.map(({ lab }) => lab)).toEqual(
      published.values.before_nov_2014.map((v) => v.Lab_D50),
    );
    const result = measureCard(...both(paintCard(values), before));
    // formulation_difference: mean 0.848; cyan is outside sRGB, and scaling on mid grey takes a little away.
    expect(of(result, 'colour.error')).toBeGreaterThan(0.4);
    expect(of(result, 'colour.error')).toBeLessThan(1.2);
  });

  test('photographed faithfully has no error and full saturation, but for cyan, which sRGB can’t hold', () => {
    const result = measureCard(...both(paintCard(values)));
    const colours = result.plots.colours.filter((c) => c.id !== 'cyan');
    for (const { id, deltaE2000 } of colours) expect(deltaE2000, id).toBeLessThan(0.3);
    expect(Math.abs(of(result, 'colour.saturation') - 100)).toBeLessThan(1);
  });

  test('an exposure error and a colour cast are no colour errors', () => {
    const gain = [0.55, 0.5, 0.42];
    const result = measureCard(...both(paintCard(values, { gain })));
    expect(of(result, 'colour.error')).toBeLessThan(0.3);
    expect(of(result, 'white.error')).toBeGreaterThan(3);
  });

  test('too little saturation is told, and that a matrix brings it back', () => {
    const result = measureCard(...both(paintCard(values, { desaturate: 0.7 })));
    expect(of(result, 'colour.saturation')).toBeLessThan(85);
    expect(of(result, 'colour.error')).toBeGreaterThan(2);
    expect(of(result, 'colour.correctable')).toBeLessThan(0.6);
  });

  const painted = paintCard(values);
  test.each([
    [0, 1, 2, 3],
    [1, 2, 3, 0],
    [2, 3, 0, 1],
    [3, 0, 1, 2],
    [1, 0, 3, 2],
    [0, 3, 2, 1],
  ])('comes to the same when the corners are marked in the order %d %d %d %d', (...order) => {
    const marked = order.map((i) => painted.corners[i]!);
    const result = measureCard(painted.frame, card, marked);
    const straight = measureCard(painted.frame, card, painted.corners);
    expect(of(result, 'colour.error')).toBeCloseTo(of(straight, 'colour.error'), 6);
    expect(result.samples.map(({ disc, x }) => [disc.id, Math.round(x)])).toEqual(
      straight.samples.map(({ disc, x }) => [disc.id, Math.round(x)]),
    );
  });

  test.each([
    [
      'corners in a line',
      'card-corners',
      [painted.corners[0], painted.corners[0], painted.corners[1], painted.corners[1]],
    ],
    ['three corners', 'card-corners', painted.corners.slice(1)],
    ['corners over half of it', 'card-not-found', half(painted.corners)],
  ] as [string, string, Point[]][])('%s is refused as %s', (_, code, marked) => {
    expect(refusal(() => measureCard(painted.frame, card, marked))).toBe(code);
  });

  test('a card of one colour is refused: it lies every way alike', () => {
    const plain = createCard(
      card.patches.map(({ id }) => ({ id, lab: [50, 0, 0] as const })),
      4,
      6,
    );
    expect(refusal(() => measureCard(painted.frame, plain, painted.corners))).toMatch(/^card-/);
  });

  test('a card without greys gives no colour and says so', () => {
    const chosen = [0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11];
    const half = createCard(
      chosen.map((i) => card.patches[i]!),
      2,
      6,
    );
    const [a, b] = painted.corners;
    const down = (p: Point) => ({ x: p.x, y: p.y + (2 - 0.13) * 40 });
    const result = measureCard(painted.frame, half, [a!, b!, down(b!), down(a!)]);
    expect(result.metrics).toEqual([]);
    expect(result.warnings.map((w) => w.code)).toEqual(['card-no-grey']);
  });
});

test('a grid that its patches don’t fill is a mistake', () => {
  expect(() => createCard(card.patches, 4, 5)).toThrow(RangeError);
});

function both(
  { frame, corners }: { frame: Frame; corners: Point[] },
  which = card,
): [Frame, typeof card, Point[]] {
  return [frame, which, corners];
}

function half(corners: readonly Point[]): Point[] {
  return corners.map(({ x, y }) => ({ x: 30 + (x - 30) / 2, y: 24 + (y - 24) / 2 }));
}

function refusal(work: () => unknown): string {
  try {
    work();
  } catch (error) {
    if (error instanceof MeasurementError) return error.code;
    throw error;
  }
  return 'none';
}
