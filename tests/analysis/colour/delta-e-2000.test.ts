import { differenceCiede2000 } from 'culori';
import { expect, test } from 'vitest';
import { deltaE2000 } from '@/analysis/colour/delta-e-2000';
import type { Triple } from '@/analysis/colour/matrix';
import published from '@/fixtures/check-values/ciede2000-verification.json';

// G. Sharma, W. Wu, E. Dalal, Color Res. Appl. 30(1), 2005, Table 1: all 34 pairs to the four decimals printed,
// pairs 9–16 on both sides of the 180° break.
test('all 34 pairs are there', () => {
  expect(published.values).toHaveLength(34);
});

test.each(published.values)(
  'pair $pair is $dE00, both ways round',
  ({ lab1, lab2, dE00, dE00_8dp }) => {
    const [one, other] = [lab1, lab2] as unknown as [Triple, Triple];
    expect(Math.abs(deltaE2000(one, other) - dE00)).toBeLessThan(1e-4);
    expect(Math.abs(deltaE2000(other, one) - dE00)).toBeLessThan(1e-4);
    // Double precision, recomputed from the formula.
    expect(deltaE2000(one, other)).toBeCloseTo(dE00_8dp, 7);
  },
);

test('agrees with culori on colours far apart and near', () => {
  // culori compares in its D65 Lab, so the numbers are handed over as that.
  const theirs = differenceCiede2000();
  for (let i = 0; i < 300; i++) {
    const lab = (k: number): Triple => [
      (k * 37) % 100,
      ((k * 73) % 200) - 100,
      ((k * 151) % 200) - 100,
    ];
    const near = i % 2 === 0;
    const one = lab(i);
    const other: Triple = near ? [one[0] + 0.3, one[1] - 0.2, one[2] + 0.1] : lab(i * 7 + 3);
    const [l, a, b] = one;
    const expected = theirs(
      { mode: 'lab65', l, a, b },
      { mode: 'lab65', l: other[0], a: other[1], b: other[2] },
    );
    expect(deltaE2000(one, other)).toBeCloseTo(expected, 6);
  }
});
