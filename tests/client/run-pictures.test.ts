import { expect, test } from 'vitest';
import type { StationPlot } from '@/analysis/result';
import { meanCurve, peersInTheMiddle, tellingCurves } from '@/components/runs/run-pictures';
import type { RunResult } from '@/lib/shared/api';

const station = (id: string, mtf50: number | null, ...responses: number[][]): StationPlot => ({
  id,
  x: 0,
  y: 0,
  radius: 1,
  corners: [],
  curves: responses.map((response, i) => ({
    edge: i === 0 ? 'vertical' : 'horizontal',
    frequency: response.map((_, n) => (n * (1 + i)) / 10),
    response,
  })),
  mtf50,
  red: null,
  blue: null,
});

// Truth: two straight lines, 1 − 2f on steps of 0.1 and 1 − f on steps of 0.2; their mean is 1 − 1.5f.
test('the mean of two edges is taken at the same frequencies', () => {
  const curve = meanCurve(station('C', 0.25, [1, 0.8, 0.6, 0.4], [1, 0.8, 0.6]));
  expect(curve?.response.map((r) => Number(r.toFixed(9)))).toEqual([1, 0.85, 0.7, 0.55]);
  expect(meanCurve(station('C', null))).toBeNull();
});

test('the middle, the weakest and the best corner are drawn, the weakest as weak', () => {
  const line = [1, 0.5];
  const stations = [
    station('C', 0.3, line),
    station('N', 0.01, line),
    station('NW', 0.2, line),
    station('SE', 0.1, line),
    station('inner-SE', 0.05, line),
    station('SW', null),
  ];
  expect(tellingCurves(stations).map(({ id, weak }) => [id, weak])).toEqual([
    ['C', false],
    ['SE', true],
    ['NW', false],
  ]);
});

// Truth: the geometric mean of 0.1 and 0.4 is 0.2.
test('peers close the rings only when there are three', () => {
  const result = (peers: number[]) =>
    ({ name: 'sharpness.mtf50', zone: 'C', edge: 'vertical', peers }) as unknown as RunResult;
  expect(peersInTheMiddle([result([0.1, 0.4])])).toBeNull();
  expect(peersInTheMiddle([result([0.1, 0.4, 0.2])])).toBeCloseTo(0.2, 12);
  expect(peersInTheMiddle([])).toBeNull();
});
