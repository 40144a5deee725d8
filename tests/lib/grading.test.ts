import { describe, expect, test } from 'vitest';
import type { Repeat } from '@/analysis/statistics/combine';
import { studentCdf, studentT } from '@/analysis/statistics/student-t';
import type { Evidence } from '@/lib/shared/grading/evidence';
import { judge, marginOf, range } from '@/lib/shared/grading/judge';
import { propose } from '@/lib/shared/grading/propose';
import type { MeasuredRule, Rule } from '@/lib/shared/grading/scheme';
import { defaultSchemes } from '@/lib/shared/grading/schemes';
import { conformance, shotsToSettle, standingOf } from '@/lib/shared/grading/standing';
import { functionCheckItems, modelClasses } from '@/lib/shared/words';

const known = Number.POSITIVE_INFINITY;
const at = (value: number, standardUncertainty: number, degreesOfFreedom = known) => ({
  value,
  standardUncertainty,
  degreesOfFreedom,
});

// Source: JCGM 106:2012 clause 7, one upper limit; values of check-values.json, uncertainty_and_decision,
// conformance_probability (printed to five decimals).
test.each([
  [0, 0.5],
  [0.5, 0.69146],
  [1, 0.84134],
  [1.2816, 0.90001],
  [1.6449, 0.95],
  [1.96, 0.975],
  [2, 0.97725],
  [2.3263, 0.99],
  [3, 0.99865],
])('a result %d u inside one limit conforms with probability %d', (distance, probability) => {
  expect(conformance(at(10 - distance * 0.2, 0.2), [null, 10])).toBeCloseTo(probability, 5);
  expect(conformance(at(10 + distance * 0.2, 0.2), [10, null])).toBeCloseTo(probability, 5);
});

// Source: JCGM 100:2008 Table G.2 / NIST TN 1297 Table B.1, one-sided 95 % points, to four decimals (check-values.json, student_t).
test.each([
  [1, 6.3138],
  [2, 2.92],
  [3, 2.3534],
  [5, 2.015],
  [10, 1.8125],
  [30, 1.6973],
  [100, 1.6602],
])('with %d degrees of freedom the guard band at 5 %% is %d u', (nu, factor) => {
  const limit = 5;
  expect(standingOf(at(limit - factor - 0.0002, 1, nu), [null, limit], 0.05)).toBe('within');
  expect(standingOf(at(limit - factor + 0.0002, 1, nu), [null, limit], 0.05)).toBe('doubt');
  expect(standingOf(at(limit + factor - 0.0002, 1, nu), [null, limit], 0.05)).toBe('doubt');
  expect(standingOf(at(limit + factor + 0.0002, 1, nu), [null, limit], 0.05)).toBe('outside');
});

// Invariant: the distribution function and its two-sided quantile are each other's inverse.
test('Student’s distribution function undoes its quantile', () => {
  for (const nu of [1, 2, 7.5, 40, known]) {
    for (const p of [0.5, 0.9, 0.95, 0.99]) {
      expect(studentCdf(studentT(p, nu), nu)).toBeCloseTo(0.5 + p / 2, 9);
      expect(studentCdf(-studentT(p, nu), nu)).toBeCloseTo(0.5 - p / 2, 9);
    }
  }
});

// Truth by construction: between two limits three deviations apart, each tail holds Φ(−1.5) = 0.0668, together more than 5 %.
test('both tails count between two close limits', () => {
  expect(conformance(at(0, 1), [-1.5, 1.5])).toBeCloseTo(1 - 2 * 0.0668072, 6);
  expect(standingOf(at(0, 1), [-1.5, 1.5], 0.05)).toBe('doubt');
});

test('a count without uncertainty stands by plain comparison, its limit included', () => {
  expect(standingOf(at(1, 0), [null, 1], 0.05)).toBe('within');
  expect(standingOf(at(2, 0), [null, 1], 0.05)).toBe('outside');
});

/** A small reproducible source of chance (Marsaglia's xorshift32). */
function chance(seed: number) {
  let state = seed;
  const uniform = () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return (state >>> 0) / 2 ** 32;
  };
  const normal = () =>
    Math.sqrt(-2 * Math.log(uniform() + 1e-12)) * Math.cos(2 * Math.PI * uniform());
  return { uniform, normal };
}

// Source: JCGM 106:2012, 8.3.2: with a guard band of 1.645 u the specific risk is at most 5 %; over units spread evenly about the limit,
// the share of false accepts among the accepted is smaller still. Simulated truth; 40 000 units give the share to ± 0.002.
test.each([
  ['well known', 4, known],
  ['from four photographs', 4, 3],
])('fewer than 5 %% of the accepted lie beyond the limit: uncertainty %s', (_, n, nu) => {
  const { uniform, normal } = chance(20261201);
  let accepted = 0;
  let falsely = 0;
  for (let unit = 0; unit < 40_000; unit++) {
    const truth = 8 * uniform() - 4;
    const shots = Array.from({ length: n }, () => truth + normal() * 2);
    const value = shots.reduce((a, b) => a + b, 0) / n;
    const s = Math.sqrt(shots.reduce((sum, x) => sum + (x - value) ** 2, 0) / (n - 1) / n);
    const result = at(value, nu === known ? 1 : s, nu);
    if (standingOf(result, [null, 0], 0.05) !== 'within') continue;
    accepted++;
    if (truth > 0) falsely++;
  }
  expect(accepted).toBeGreaterThan(5000);
  expect(falsely / accepted).toBeLessThan(0.05);
});

describe('how many more photographs would settle a doubt', () => {
  const repeats = (values: number[], uncertainty: number): Repeat[] =>
    values.map((value) => ({ value, uncertainty }));

  // Truth by construction: u = 1/√n must fall to 0.5/1.645 = 0.304, so n = 10.8: eleven in all, ten more.
  test('stated noise alone: ten more after the first', () => {
    expect(shotsToSettle(repeats([9.5], 1), [null, 10], 0.05)).toBe(10);
  });

  test('a mean on the limit is never settled by more of the same', () => {
    expect(shotsToSettle(repeats([9.9, 10.1], 0.2), [null, 10], 0.05)).toBeNull();
  });

  // Monotone: the wider the scatter, the more photographs it takes.
  test('more scatter asks for more photographs', () => {
    const asked = [0.5, 0.8, 1.1].map(
      (d) => shotsToSettle(repeats([9 - d, 9, 9 + d], 0.01), [null, 10], 0.05) ?? 99,
    );
    expect(asked[0]).toBeLessThanOrEqual(asked[1]!);
    expect(asked[1]).toBeLessThanOrEqual(asked[2]!);
  });
});

const evidenceOf = (
  values: Record<string, number[]>,
  failed: string[] = [],
  unmade: string[] = [],
): Evidence => ({
  measured: (quantity, zone) =>
    values[`${quantity}|${zone ?? ''}`]?.map((value) => ({ value, uncertainty: 0.005 })) ?? null,
  peers: () => [],
  checks: new Map(
    functionCheckItems
      .filter((item) => !unmade.includes(item.id))
      .map((item) => [item.id, failed.includes(item.id) ? 'fail' : 'pass']),
  ),
});

/** Comfortably inside every A limit of the small-sensor scheme. */
const sound = {
  'exposure.bias|': [0.02, 0.03],
  'clip.highlights|': [0.3],
  'colour.error|': [3.1],
  'colour.saturation|': [108],
  'white.error|': [2],
  'sharpness.mtf50|centre': [0.27],
  'sharpness.cornerRatio|': [78],
  'sharpness.asymmetry|': [9],
  'fringe.red|corners': [0.6],
  'fringe.blue|corners': [-0.5],
  'fringe.shift|': [0.08],
  'noise.snr|': [37],
  'shading.corner|': [-0.6],
  'shading.asymmetry|': [0.1],
  'distortion.corner|': [-1.2],
};
const scheme = defaultSchemes['small-sensor-compact'];

describe('the proposed grade', () => {
  test('is A when every rule clearly allows it', () => {
    const proposal = propose(scheme, evidenceOf(sound));
    expect(proposal.letter).toBe('A');
    expect(proposal.rules.every((rule) => rule.standing === 'within')).toBe(true);
    expect(proposal).toMatchObject({ inDoubt: 0, untested: 0 });
  });

  test('is the worst that any rule forces, and says which', () => {
    const proposal = propose(scheme, evidenceOf({ ...sound, 'exposure.bias|': [-0.68, -0.69] }));
    expect(proposal.letter).toBe('B');
    expect(proposal.sentence).toBe('Held at B by exposure.');
    const held = proposal.rules.filter((rule) => rule.standing !== 'within');
    expect(held.map((rule) => [rule.ruleId, rule.standing, rule.allows])).toEqual([
      ['exposure', 'outside', 'B'],
    ]);
  });

  test('counts a doubt as the lower grade, and the sentence says so', () => {
    const proposal = propose(scheme, evidenceOf({ ...sound, 'fringe.shift|': [0.327] }));
    expect(proposal).toMatchObject({ letter: 'B', inDoubt: 1 });
    expect(proposal.sentence).toBe('Held at B by colour shift over the whole frame (in doubt).');
    const rule = proposal.rules.find((one) => one.ruleId === 'shift');
    expect(rule).toMatchObject({ standing: 'doubt', allows: 'B' });
    expect(rule?.moreShots).toBeGreaterThan(0);
    expect(rule?.sentence).toContain('more photographs of the target would settle it');
  });

  test('caps at C, or bars from sale, as the rule says', () => {
    const soft = propose(scheme, evidenceOf({ ...sound, 'sharpness.cornerRatio|': [20] }));
    expect(soft.letter).toBe('C');
    const blurred = propose(scheme, evidenceOf({ ...sound, 'sharpness.mtf50|centre': [0.05] }));
    expect(blurred.letter).toBe('Parts');
  });

  test('never passes what was not tested', () => {
    const { 'noise.snr|': _, ...rest } = sound;
    const proposal = propose(scheme, evidenceOf(rest));
    expect(proposal).toMatchObject({ letter: 'C', untested: 1 });
    expect(proposal.sentence).toBe('Held at C by signal to noise not being tested.');
    const checks = propose(scheme, evidenceOf(sound, [], ['zoom', 'flash']));
    expect(checks).toMatchObject({ letter: 'Parts', untested: 2 });
    const essential = checks.rules.find((rule) => rule.ruleId === 'essential-checks');
    expect(essential?.sentence).toContain('Zoom, end to end');
  });

  test('goes down by a grade for each minor function that fails, and to parts for an essential one', () => {
    const letter = (...failed: string[]) => propose(scheme, evidenceOf(sound, failed)).letter;
    expect(letter('flash')).toBe('B');
    expect(letter('flash', 'video')).toBe('C');
    expect(letter('flash', 'video', 'ports')).toBe('C');
    expect(letter('display')).toBe('Parts');
  });
});

describe('the schemes that ship', () => {
  test.each(modelClasses)(
    '%s: limits are nested, drawn on their scale, and each has a reason',
    (modelClass) => {
      const { rules } = defaultSchemes[modelClass];
      expect(rules.length).toBeGreaterThanOrEqual(12);
      expect(new Set(rules.map((rule) => rule.id)).size).toBe(rules.length);
      for (const rule of rules) {
        expect(rule.reason.length, rule.id).toBeGreaterThan(20);
        for (const [inner, outer] of [
          [rule.limits.A, rule.limits.B],
          [rule.limits.B, rule.limits.C],
        ] as const) {
          expect(inner[0] ?? -1e9, rule.id).toBeGreaterThanOrEqual(outer[0] ?? -1e9);
          expect(inner[1] ?? 1e9, rule.id).toBeLessThanOrEqual(outer[1] ?? 1e9);
          for (const limit of [...inner, ...outer]) {
            if (limit === null) continue;
            expect(limit, rule.id).toBeGreaterThanOrEqual(rule.scale.min);
            expect(limit, rule.id).toBeLessThanOrEqual(rule.scale.max);
          }
        }
      }
    },
  );

  // Monotone: a result that moves away from good never earns a better grade.
  test('no rule grades a worse result better', () => {
    const measured = scheme.rules.filter((rule): rule is MeasuredRule => rule.of === 'measurement');
    for (const rule of measured) {
      const { min, max } = rule.scale;
      const good = sound[`${rule.quantity}|${rule.zone ?? ''}` as keyof typeof sound][0]!;
      for (const end of [min, max]) {
        const letters = Array.from({ length: 60 }, (_, i) => good + ((end - good) * i) / 59).map(
          (value) => allowedBy(rule, value),
        );
        expect(letters, `${rule.id} towards ${end}`).toEqual(letters.toSorted());
      }
    }
  });
});

// 'A' < 'B' < 'C' < 'Parts' as text, too.
function allowedBy(rule: Rule & MeasuredRule, value: number): string {
  const evidence = evidenceOf({ [`${rule.quantity}|${rule.zone ?? ''}`]: [value] });
  return judge(rule, evidence, 0.05).outcome.allows;
}

test('limits and margins read plainly', () => {
  expect(range([null, 5], 'ΔE00')).toBe('at most 5\u00a0ΔE');
  expect(range([65, null], '%')).toBe('at least 65\u00a0%');
  expect(range([-1, 0.4], 'EV')).toBe('−1.0 to 0.4\u00a0EV');
  expect(range([null, 0.33], 'px')).toBe('at most 0.33\u00a0px');
  expect(marginOf(-0.3, [-0.4, 0.4])).toBeCloseTo(0.1, 12);
  expect(marginOf(60, [65, null])).toBe(-5);
});
