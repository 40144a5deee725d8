import { describe, expect, test } from 'vitest';
import { normalCdf, normalQuantile } from '@/analysis/numeric/normal';
import {
  combineRepeats,
  expandedUncertainty,
  typeA,
  welchSatterthwaite,
} from '@/analysis/statistics/combine';
import { median, modifiedZScores } from '@/analysis/statistics/outliers';
import { studentCdf, studentT } from '@/analysis/statistics/student-t';
import table from '@/fixtures/check-values/student-t.json';
import uncertainty from '@/fixtures/check-values/uncertainty-and-decision.json';
import { missing, runPython } from '../../oracles/oracle';

// JCGM 100:2008 Table G.2, to the four places of the reference file.
describe('Student’s t', () => {
  test.each(table.values)('ν = $nu', (row) => {
    expect(studentT(0.95, Number(row.nu))).toBeCloseTo(row.t95, 3.9);
    expect(studentT(0.9545, Number(row.nu))).toBeCloseTo(row.t95_45, 3);
    expect(studentT(0.99, Number(row.nu))).toBeCloseTo(row.t99, 3.9);
    expect(studentCdf(row.one_sided_95, Number(row.nu))).toBeCloseTo(0.95, 4);
  });
  test('no freedom, no factor', () => {
    expect(() => studentT(0.95, 0.5)).toThrow(RangeError);
    expect(() => studentT(1, 5)).toThrow(RangeError);
  });
});

// JCGM 106:2012: probability of conformity at distances from the limit.
test.each(uncertainty.values.conformance_probability)(
  'a value $distance_from_limit_in_u u from its limit conforms with $p_conform_one_sided',
  ({ distance_from_limit_in_u, p_conform_one_sided }) => {
    expect(normalCdf(distance_from_limit_in_u)).toBeCloseTo(p_conform_one_sided, 4.9);
  },
);

test.skipIf(missing('python'))('Φ and its inverse agree with scipy over the whole range', () => {
  const z = Array.from({ length: 61 }, (_, i) => -7.5 + i / 4);
  const oracle = runPython(
    'import json,sys\nfrom scipy.stats import norm\nz=json.loads(sys.argv[1])\nprint(json.dumps([float(norm.cdf(v)) for v in z]))',
    [JSON.stringify(z)],
  ) as number[];
  z.forEach((value, i) => {
    expect(normalCdf(value) / oracle[i]!).toBeCloseTo(1, 10);
    if (value < 4) expect(normalQuantile(oracle[i]!)).toBeCloseTo(value, 9);
  });
});

describe('uncertainty (JCGM 100:2008)', () => {
  test('Welch–Satterthwaite and the expanded uncertainty of the worked example', () => {
    const e = uncertainty.values.welch_satterthwaite_example;
    const parts = e.u.map((u, i) => ({
      uncertainty: u,
      degreesOfFreedom: e.nu[i] === 'inf' ? Number.POSITIVE_INFINITY : Number(e.nu[i]),
    }));
    const { standardUncertainty, degreesOfFreedom } = welchSatterthwaite(parts);
    expect(standardUncertainty).toBeCloseTo(e.uc, 6);
    expect(degreesOfFreedom).toBeCloseTo(e.nu_eff, 4);
    expect(expandedUncertainty(standardUncertainty, degreesOfFreedom)).toBeCloseTo(e.U95, 5);
  });

  test('mean of three repeats whose scatter outweighs what each states', () => {
    const e = uncertainty.values.mean_example;
    const combined = combineRepeats(e.x.map((value) => ({ value, uncertainty: 0.001 })));
    expect(typeA(e.x)).toBeCloseTo(e.u_mean, 5);
    expect(combined.mean).toBeCloseTo(e.mean, 6);
    expect(combined.degreesOfFreedom).toBe(e.nu);
    expect(combined.expanded).toBeCloseTo(e.U95, 4);
  });

  test('repeats that happen to agree are no surer than they say they are', () => {
    const same = [1, 1, 1].map((value) => ({ value, uncertainty: 0.3 }));
    const combined = combineRepeats(same);
    expect(combined.standardUncertainty).toBeCloseTo(0.3 / Math.sqrt(3), 12);
    expect(combined.expanded).toBeCloseTo(1.959964 * combined.standardUncertainty, 6);
    expect(() => combineRepeats([])).toThrow(RangeError);
  });
});

// The score's definition: 0.6745 (x − median)/MAD.
test('modified z-scores pick out the stray unit and survive equal values', () => {
  const scores = modifiedZScores([10, 11, 9, 10, 12, 8, 30]);
  expect(scores[6]).toBeCloseTo((0.6745 * (30 - 10)) / 1, 2);
  expect(Math.max(...scores.slice(0, 6).map(Math.abs))).toBeLessThan(3.5);
  expect(modifiedZScores([3, 3, 3])).toEqual([0, 0, 0]);
  expect(modifiedZScores([3, 3, 3, 5])[3]).toBeGreaterThan(2);
  expect(median([4, 1, 3, 2])).toBe(2.5);
});
