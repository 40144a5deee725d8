import { expect, test } from 'vitest';
import { invertMatrix, solveLinear } from '../../../analysis/numeric/linear-solve.ts';

// Truth: the inverse of the 4 × 4 Hilbert matrix is a matrix of integers, by the closed form in Knuth, TAOCP 1, 1.2.3 (from memory).
test('the inverse of the 4 × 4 Hilbert matrix is the published one', () => {
  const hilbert = Array.from({ length: 16 }, (_, i) => 1 / ((i >> 2) + (i & 3) + 1));
  const inverse = invertMatrix(hilbert, 4)!;
  const published = [
    16, -120, 240, -140, -120, 1200, -2700, 1680, 240, -2700, 6480, -4200, -140, 1680, -4200, 2800,
  ];
  // The condition number of some 15 000 costs four of sixteen digits.
  published.forEach((value, i) => {
    expect(inverse[i]! / value).toBeCloseTo(1, 9);
  });
});

test('rows are exchanged when the first pivot is 0', () => {
  expect([...solveLinear([0, 2, 3, 0], [4, 9], 2)!]).toEqual([3, 2]);
});

test('a singular matrix has no solution', () => {
  expect(solveLinear([1, 2, 2, 4], [1, 1], 2)).toBeNull();
});
