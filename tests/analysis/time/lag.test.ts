import { describe, expect, test } from 'vitest';
import { measureLag, personUncertainty, shotLag } from '@/analysis/time/lag';

const shots = (values: readonly number[], frameTime = 16.67) =>
  values.map((elapsed, i) => ({
    name: `${i}.jpg`,
    timing: { frameTime, elapsed, exposureFrames: 0.5 },
  }));
const codes = (values: readonly number[]) =>
  measureLag(shots(values)).warnings.map(({ code }) => code);

describe('shutter lag of a series', () => {
  // JCGM 100 4.2.3: s/√n of 80, 90, 100, 110, 120 is √250/√5 = 7.0711; G.3: parts add in squares.
  test('mean, and scatter with the person’s habit in squares', () => {
    const { metrics } = measureLag(shots([80, 90, 100, 110, 120]));
    expect(metrics).toHaveLength(1);
    expect(metrics[0]).toMatchObject({ name: 'lag.shutter', unit: 'ms', value: 100 });
    expect(metrics[0]?.uncertainty).toBeCloseTo(Math.hypot(7.0711, personUncertainty), 4);
  });

  // JCGM 100 4.3.7: a rectangular distribution of width d has d/√12.
  test('equal readings leave the screen’s frame and the person', () => {
    const { metrics } = measureLag(shots([100, 100, 100, 100, 100]));
    const frame = 16.67 / Math.sqrt(12) / Math.sqrt(5);
    expect(metrics[0]?.uncertainty).toBeCloseTo(Math.hypot(frame, personUncertainty), 6);
    const one = shotLag({ frameTime: 16.67, elapsed: 100 });
    expect(one.uncertainty).toBeCloseTo(Math.hypot(4.8122, personUncertainty), 4);
  });

  test('says when shots are few, when one is far off, when the mark was not reached', () => {
    expect(codes([100, 104])).toContain('lag-few-shots');
    expect(codes([100, 104, 96, 99, 103])).toEqual(['lag-by-hand']);
    expect(codes([100, 104, 96, 99, 403])).toContain('lag-outlier');
    expect(codes([-100, -104, -96, -99, -103])).toContain('lag-before-mark');
    expect(measureLag([]).metrics).toEqual([]);
  });
});
