import { describe, expect, test } from 'vitest';
import { smoothingSpline } from '@/analysis/exposure/smoothing-spline';
import { createRandom } from '@/fixtures/scene/random';

/** log2 of twelve greys, a third to half a stop apart. */
const greys = [0.05, 0.07, 0.1, 0.14, 0.19, 0.25, 0.32, 0.4, 0.49, 0.6, 0.72, 0.85].map(Math.log2);
const points = (f: (x: number) => number, sigma: number) =>
  greys.map((x) => ({ x, y: f(x), sigma }));

// Wahba, J. R. Stat. Soc. B 40 (1978) 364: smoothness by likelihood; the checks are the definition's own limits.
describe('smoothing spline', () => {
  test('keeps a straight line straight, between and beyond the points', () => {
    const spline = smoothingSpline(points((x) => 0.4 + 1.3 * x, 0.002))!;
    for (const x of [-5, -4, -2.2, -0.7, 0.3]) expect(spline(x)).toBeCloseTo(0.4 + 1.3 * x, 3);
  });

  test('follows the start of a shoulder that well-told greys show, to a few thousandths of a stop', () => {
    const shoulder = (x: number) => (x < -1.5 ? x : x + 0.7 * (x + 1.5) ** 2);
    const spline = smoothingSpline(points(shoulder, 0.001))!;
    for (let x = -4; x < -0.3; x += 0.05)
      expect(Math.abs(spline(x) - shoulder(x))).toBeLessThan(0.006);
  });

  test('smooths what is no more than the points’ own noise', () => {
    const random = createRandom(5);
    const noise = () => (random() - 0.5) * Math.sqrt(12) * 0.02;
    const noisy = greys.map((x) => ({ x, y: x + noise(), sigma: 0.02 }));
    const spline = smoothingSpline(noisy)!;
    const off = noisy.map(({ x, y }) => [spline(x) - x, y - x] as const);
    const square = (i: 0 | 1) => off.reduce((sum, pair) => sum + pair[i] ** 2, 0);
    expect(square(0)).toBeLessThan(0.4 * square(1));
  });

  test('three points are too few', () => {
    expect(smoothingSpline(points((x) => x, 0.01).slice(0, 3))).toBeNull();
  });
});
