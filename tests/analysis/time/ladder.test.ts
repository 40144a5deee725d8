import { describe, expect, test } from 'vitest';
import type { Capture } from '@/analysis/image';
import { measureLadder } from '@/analysis/time/ladder';
import type { LadderShot } from '@/analysis/time/ladder-shots';
import { photographLadder, rungsOf } from './ladder-scenes';

const scene = {
  width: 1000,
  height: 750,
  toneContrast: 1.25,
  shadingCornerEv: -0.8,
  lightTiltEv: 0.1,
  snrDb: 36,
  blurSigma: 0.8,
} as const;
const allowed = 0.03; // measurements.md

// Truth by construction: exposures planted by the renderer, which shares nothing with the analysis.
test('planted errors of single rungs come back within 0.03 EV, the Exif’s labels notwithstanding', async () => {
  const planted = [0, 0.2, 0, -0.12, 0];
  const { metrics, warnings } = await photographLadder(scene, rungsOf(0, planted));
  const steps = metrics.filter(({ name }) => name === 'ladder.step');
  expect(steps.map(({ zone }) => zone)).toEqual(['1/500', '1/250', '1/125', '1/60', '1/30']);
  steps.forEach(({ value }, i) => {
    expect(Math.abs(value - planted[i]!)).toBeLessThan(allowed);
  });
  const worst = metrics.find(({ name }) => name === 'ladder.worst');
  expect(Math.abs(worst!.value - 0.2)).toBeLessThan(allowed);
  expect(warnings).toEqual([]);
});

test('a rung that clips is left out and named, the others stay', async () => {
  const rungs = rungsOf(0.9, [0, 0, 0.1, 0, 0]);
  const { metrics, warnings } = await photographLadder(scene, rungs);
  const zones = metrics.filter(({ name }) => name === 'ladder.step').map(({ zone }) => zone);
  expect(zones).not.toContain('1/30');
  expect(zones.length).toBeGreaterThanOrEqual(3);
  const clipped = warnings.find(({ code }) => code === 'ladder-rung-clipped');
  expect(clipped?.zone).toBe('1/30');
  expect(clipped?.message).toContain('rung-4.jpg');
  const middle = metrics.find(({ zone }) => zone === '1/125');
  expect(Math.abs(middle!.value - 0.1)).toBeLessThan(allowed);
});

const capture: Capture = {
  make: null,
  model: null,
  serial: null,
  exposureTime: 1 / 125,
  fNumber: 5.6,
  iso: 100,
  exposureBias: null,
  focalLength: null,
  takenAt: null,
  program: 'manual',
  flash: null,
  software: null,
};
const reflectances = [0.048, 0.072, 0.103, 0.142, 0.19, 0.248, 0.317, 0.397, 0.49, 0.6, 0.72];

/** Greys of a camera with gamma 1.2, without noise. */
function shot(name: string, ev: number, settings: Partial<Capture>): LadderShot {
  const greys = reflectances
    .map((light) => ({ light, luminance: 0.18 * ((light * 2 ** ev) / 0.18) ** 1.2 }))
    .filter(({ luminance }) => luminance < 0.98)
    .map((grey) => ({ ...grey, uncertainty: 0.003 * grey.luminance }));
  return {
    name,
    capture: { ...capture, ...settings },
    greys,
    median: { name: 'exposure.median', value: ev, unit: 'EV', uncertainty: 0.005 },
    clippedHighlights: 0,
  };
}
const stepsOf = (shots: readonly LadderShot[]) =>
  measureLadder(shots).metrics.filter(({ name }) => name === 'ladder.step');

describe('what the settings should give', () => {
  // STANDARDS §14: judge against 1/128, not 1/125; labels are up to 0.09 EV off.
  test('exact series values of times, apertures and ISO: a faithful camera has no error', () => {
    const shots = [
      shot('a', -1, { exposureTime: 1 / 250 }),
      shot('b', 0, {}),
      shot('c', 0, { exposureTime: 1 / 60, fNumber: 8 }),
      shot('d', 1, { exposureTime: 1 / 60 }),
      shot('e', 1, { iso: 200 }),
      shot('f', 1 / 3, { exposureTime: 1 / 100 }),
    ];
    for (const { value } of stepsOf(shots)) expect(Math.abs(value)).toBeLessThan(0.004);
  });

  test('zones name what varies', () => {
    const apertures = [
      shot('a', 0, {}),
      shot('b', -1, { fNumber: 8 }),
      shot('c', 1, { fNumber: 4 }),
    ];
    expect(stepsOf(apertures).map(({ zone }) => zone)).toEqual(['f/5.6', 'f/8', 'f/4']);
    const both = [shot('a', 0, {}), shot('b', 0, { exposureTime: 1 / 60, fNumber: 8 })];
    expect(stepsOf(both).map(({ zone }) => zone)).toEqual(['1/125 f/5.6', '1/60 f/8']);
  });

  // JCGM 100 4.2.3: the scatter of repeats counts when it is larger than what the frames state.
  test('repeats of a rung are averaged, and their scatter is its uncertainty', () => {
    const shots = [
      shot('a', 0, {}),
      shot('b', -1.1, { exposureTime: 1 / 250 }),
      shot('c', -0.9, { exposureTime: 1 / 250 }),
      shot('d', 1, { exposureTime: 1 / 60 }),
    ];
    const twice = stepsOf(shots).find(({ zone }) => zone === '1/250')!;
    expect(Math.abs(twice.value)).toBeLessThan(0.005);
    expect(twice.uncertainty).toBeGreaterThan(0.1);
  });
});

describe('what can’t be compared is named', () => {
  const codes = (shots: readonly LadderShot[]) =>
    measureLadder(shots).warnings.map(({ code, zone }) => `${code} ${zone ?? ''}`.trim());

  test('no exposure time, no target, no codes in common, too dark', () => {
    const others = [shot('a', 0, {}), shot('b', 1, { exposureTime: 1 / 60 })];
    const untimed = shot('untimed.jpg', 0, { exposureTime: null });
    const { warnings } = measureLadder([...others, untimed]);
    expect(warnings[0]?.message).toContain('untimed.jpg');
    const bare = { ...shot('bare', -1, { exposureTime: 1 / 250 }), greys: null };
    expect(codes([...others, bare])).toEqual(['ladder-rung-left-out 1/250']);
    const dark = shot('dark', -6.2, { exposureTime: 1 / 8000 });
    expect(codes([...others, dark])).toEqual(['ladder-rung-clipped 1/8000']);
    expect(codes([shot('a', 0, {})])).toEqual(['ladder-too-short']);
  });

  test('another ISO, another curve', () => {
    expect(codes([shot('a', 0, {}), shot('b', 1, { iso: 200 })])).toEqual(['ladder-iso-varies']);
    const bent = shot('b', 0, { exposureTime: 1 / 60 });
    const greys = bent.greys!.map((g) => ({ ...g, luminance: g.luminance ** 1.5 }));
    expect(codes([shot('a', 0, {}), { ...bent, greys }])).toContain('ladder-curve-changed');
  });
});

describe('without greys only a null method', () => {
  const bare = (name: string, ev: number, settings: Partial<Capture>) => ({
    ...shot(name, ev, settings),
    greys: null,
  });

  // STANDARDS §14: reciprocal pairs (t·k, N·√k) must give equal codes.
  test('reciprocal settings are compared, the rest is named', () => {
    const { metrics, warnings } = measureLadder([
      bare('a', 0, {}),
      bare('b', 0.1, { exposureTime: 1 / 60, fNumber: 8 }),
      bare('c', 0, { exposureTime: 1 / 30, fNumber: 11 }),
      bare('d', 1, { exposureTime: 1 / 60 }),
    ]);
    const steps = metrics.filter(({ name }) => name === 'ladder.step');
    expect(steps.map(({ zone }) => zone)).toEqual(['1/125 f/5.6', '1/60 f/8', '1/30 f/11']);
    expect(steps[1]!.value).toBeCloseTo(0.1, 6);
    expect(steps[1]!.uncertainty).toBeGreaterThan(0.025);
    expect(warnings.map(({ code, zone }) => `${code} ${zone ?? ''}`.trim())).toEqual([
      'ladder-no-greys',
      'ladder-rung-left-out 1/60 f/5.6',
    ]);
  });

  test('a plain ladder of times gives no number at all', () => {
    const shots = [bare('a', 0, {}), bare('b', 1, { exposureTime: 1 / 60 })];
    expect(measureLadder(shots).metrics).toEqual([]);
  });
});
