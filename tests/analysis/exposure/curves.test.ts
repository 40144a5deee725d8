import { describe, expect, test } from 'vitest';
import { localFit } from '@/analysis/exposure/local-fit';
import { monotoneCurve } from '@/analysis/exposure/monotone-curve';

describe('monotone curve (Fritsch & Carlson 1980)', () => {
  const x = [0, 1, 1.1, 3, 4];
  const y = [0, 0.1, 2, 2.05, 5];
  const curve = monotoneCurve(x, y, 1, 2);

  test('goes through its points', () => {
    x.forEach((at, i) => {
      expect(curve(at)).toBeCloseTo(y[i]!, 12);
    });
  });
  test('never falls, however uneven the points', () => {
    const values = Array.from({ length: 6001 }, (_, i) => curve(i / 1000 - 1));
    expect(values.every((value, i) => i === 0 || value >= values[i - 1]!)).toBe(true);
  });
  test('keeps a straight line straight, beyond both ends too', () => {
    const line = monotoneCurve([0, 1, 4], [1, 3, 9], 2, 2);
    for (const at of [-2, 0.3, 2.5, 6]) expect(line(at)).toBeCloseTo(1 + 2 * at, 12);
  });
});

describe('local fit', () => {
  const points = (f: (x: number) => number) =>
    Array.from({ length: 12 }, (_, i) => ({ x: -4 + 0.4 * i, y: f(-4 + 0.4 * i), sigma: 0.01 }));

  test('a parabola is reproduced exactly, value and slope', () => {
    const fit = localFit(
      points((x) => 1 + 2 * x - 0.3 * x * x),
      -1.7,
      1.3,
    );
    expect(fit?.value).toBeCloseTo(1 - 3.4 - 0.3 * 1.7 ** 2, 9);
    expect(fit?.slope).toBeCloseTo(2 + 0.6 * 1.7, 9);
  });
  test('the uncertainty is that of an average of some points', () => {
    const fit = localFit(
      points((x) => x),
      -2,
      1.3,
    )!;
    expect(fit.uncertainty).toBeGreaterThan(0.01 / Math.sqrt(12));
    expect(fit.uncertainty).toBeLessThan(0.01);
  });
  test('scatter beyond the stated uncertainty widens it', () => {
    const rough = localFit(
      points((x) => x + 0.2 * Math.sin(40 * x)),
      -2,
      1.3,
    )!;
    const smooth = localFit(
      points((x) => x),
      -2,
      1.3,
    )!;
    expect(rough.uncertainty).toBeGreaterThan(3 * smooth.uncertainty);
  });
  test('three points are too few', () => {
    expect(localFit(points((x) => x).slice(0, 3), -3.8, 1.3)).toBeNull();
  });
});
