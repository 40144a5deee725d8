import { expect, test } from 'vitest';
import { decode } from '../../../analysis/decode.ts';
import { MeasurementError } from '../../../analysis/errors.ts';
import type { Frame } from '../../../analysis/image.ts';
import { squareCorners } from '../../../analysis/target/refine-corners.ts';
import { registerTarget } from '../../../analysis/target/register.ts';
import type { Registration } from '../../../analysis/target/registration.ts';
import { renderFree } from '../../../fixtures/scene/flat.ts';
import type { ScenePlan } from '../../../fixtures/scene/plan.ts';
import { createNormal } from '../../../fixtures/scene/random.ts';
import { renderScene } from '../../../fixtures/scene/render.ts';
import type { SceneTruth } from '../../../fixtures/scene/truth.ts';
import { drawScene } from './registration-scenes.ts';

async function photograph(plan: ScenePlan): Promise<{ frame: Frame; truth: SceneTruth }> {
  const { bytes, truth } = await renderScene(plan);
  return { frame: (await decode(bytes)).frame, truth };
}

function worstRing(found: Registration, truth: SceneTruth): number {
  return Math.max(
    ...Object.entries(truth.rings).map(([id, [x, y]]) => {
      const ring = found.summary.rings[id]!;
      return Math.hypot(ring[0] - x, ring[1] - y);
    }),
  );
}

// measurements.md, "How close": found, and rings within 0.3 px. The study over 200 scenes is tests/accuracy/registration.ts.
test.each(Array.from({ length: 8 }, (_, i) => 501 + i))(
  'scene %d: the shape is told and every ring found within 0.3 px',
  async (seed) => {
    const plan = drawScene(seed);
    const { frame, truth } = await photograph(plan);
    const found = registerTarget(frame);
    expect(found.target.name).toBe(plan.target);
    expect(worstRing(found, truth), JSON.stringify(plan)).toBeLessThan(0.3);
  },
);

const clear: ScenePlan = {
  width: 1000,
  height: 750,
  fill: 0.9,
  rotationDegrees: 4,
  tiltXDegrees: 3,
  tiltYDegrees: -2,
  distortionCornerPercent: -4,
  blurSigma: 0.8,
  snrDb: 40,
  format: { type: 'png' },
};
const clearPhotograph = photograph(clear);

test('the map, its inverse and its derivative agree, and its parts are what was planted', async () => {
  const { frame, truth } = await clearPhotograph;
  const found = registerTarget(frame);
  expect(Math.abs(found.summary.rotation - 4)).toBeLessThan(0.5); // tilt turns the axis a little
  expect(found.summary.residual).toBeLessThan(0.1);
  const { corner, uncertainty } = found.distortion;
  expect(Math.abs(corner - truth.distortionCorner)).toBeLessThan(0.05);
  expect(Math.abs(corner - truth.distortionCorner)).toBeLessThan(4 * uncertainty);
  // 0.9 of the height, and 1200 : 900 like the frame; barrel and tilt take some off.
  expect(found.summary.coverage).toBeGreaterThan(0.74);
  expect(found.summary.coverage).toBeLessThan(0.82);
  for (const [x, y] of [
    [0, 0],
    [-600, -450],
    [600, 450],
    [300, -250],
  ] as const) {
    const seen = found.toImage(x, y);
    const [px, py] = truth.toImage(x, y);
    expect(Math.hypot(seen.x - px, seen.y - py)).toBeLessThan(0.15);
    const back = found.toTarget(seen.x, seen.y);
    expect(Math.hypot(back.x - x, back.y - y)).toBeLessThan(1e-6);
    const step = found.toImage(x + 1, y);
    expect(found.jacobian(x, y)[0]).toBeCloseTo(step.x - seen.x, 2);
    expect(found.jacobian(x, y)[2]).toBeCloseTo(step.y - seen.y, 2);
  }
});

test('the squares’ corners are found in order, each within 0.3 px', async () => {
  const { frame, truth } = await clearPhotograph;
  const { corners, target } = registerTarget(frame);
  expect([...corners.keys()]).toEqual(target.stations.map(({ id }) => id));
  for (const station of target.stations) {
    const printed = squareCorners(target, station);
    corners.get(station.id)!.forEach((corner, i) => {
      const [x, y] = truth.toImage(printed[i]!.x, printed[i]!.y);
      expect(Math.hypot(corner.x - x, corner.y - y)).toBeLessThan(0.3);
    });
  }
});

test('a wrong tone curve moves no ring: contrast 1.4 and 0.8', async () => {
  for (const toneContrast of [0.8, 1.4]) {
    const { frame, truth } = await photograph({ ...clear, width: 800, height: 600, toneContrast });
    expect(worstRing(registerTarget(frame), truth)).toBeLessThan(0.1);
  }
});

test.each([90, 180, -90])(
  'a camera turned by %d° gives the target the right way up',
  async (turn) => {
    const upright = turn === 180;
    const frameSize = upright ? { width: 640, height: 480 } : { width: 480, height: 640 };
    const { frame, truth } = await photograph({
      ...clear,
      ...frameSize,
      fill: 0.7,
      rotationDegrees: turn,
    });
    const found = registerTarget(frame);
    expect(worstRing(found, truth)).toBeLessThan(0.15);
    const off = (((found.summary.rotation - turn) % 360) + 540) % 360;
    expect(Math.abs(off - 180)).toBeLessThan(1);
  },
);

test('a target of which a third is cut off is found', async () => {
  const { frame, truth } = await photograph({ ...clear, offset: [350, 50] });
  const found = registerTarget(frame);
  expect(found.corners.size).toBeLessThan(13);
  expect(found.corners.size).toBeGreaterThanOrEqual(7);
  expect(worstRing(found, truth)).toBeLessThan(0.3);
});

function greyFrame(width: number, height: number, code: (x: number, y: number) => number): Frame {
  const data = new Uint8Array(width * height * 3);
  for (let i = 0; i < width * height; i++) {
    data.fill(code(i % width, Math.floor(i / width)), 3 * i, 3 * i + 3);
  }
  const table = Float32Array.from({ length: 256 }, (_, value) => (value / 255) ** 2.2);
  return { width, height, data, maxCode: 255, toLinear: [table, table, table], toSrgb: null };
}

function noise(width: number, height: number): Float32Array {
  const values = new Float32Array(width * height);
  createNormal(9)(values);
  return values;
}

const grain = noise(800, 600);
/** Squares of the station's look, but in no pattern of the target's. */
const squares = (x: number, y: number) => {
  const away = Math.max(Math.abs((x % 100) - 50), Math.abs((y % 100) - 50));
  return away < 14 ? 60 : Math.hypot((x % 100) - 50, (y % 100) - 50) < 28 ? 160 : 110;
};

test.each([
  ['an even grey', greyFrame(800, 600, () => 118)],
  ['noise', greyFrame(800, 600, (x, y) => 118 + 30 * grain[y * 800 + x]!)],
  ['a chessboard', greyFrame(800, 600, (x, y) => (((x >> 6) + (y >> 6)) % 2 ? 200 : 40))],
  ['rows of the same squares', greyFrame(800, 600, squares)],
  ['a frame of four pixels', greyFrame(2, 2, () => 118)],
])('%s is refused with a sentence', (_, frame) => {
  expect(() => registerTarget(frame)).toThrow(MeasurementError);
  expect(() => registerTarget(frame)).toThrow(/^The target was not found: .+\. Photograph .+\.$/);
});

test('a scene without the target is refused', async () => {
  for (const seed of [1, 2]) {
    const { bytes } = await renderFree({ width: 800, height: 600, seed });
    const { frame } = await decode(bytes);
    expect(() => registerTarget(frame)).toThrow(MeasurementError);
  }
});

test('asked for the other shape, the target is refused', async () => {
  const { frame } = await clearPhotograph;
  expect(() => registerTarget(frame, { target: '3x2' })).toThrow(MeasurementError);
});
