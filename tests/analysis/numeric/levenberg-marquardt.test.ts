import { expect, test } from 'vitest';
import {
  leastSquares,
  type ResidualFunction,
} from '../../../analysis/numeric/levenberg-marquardt.ts';

// NIST Statistical Reference Datasets, nonlinear regression, Misra1a: y = b1 (1 − exp(−b2 x)). Data and certified values from memory.
const y = [
  10.07, 14.73, 17.94, 23.93, 29.61, 35.18, 40.02, 44.82, 50.76, 55.05, 61.01, 66.4, 75.47, 81.78,
];
const x = [
  77.6, 114.9, 141.1, 190.8, 239.9, 289.0, 332.8, 378.4, 434.8, 477.3, 536.8, 593.1, 689.1, 760.0,
];
const misra: ResidualFunction = ([b1, b2], out, jacobian) => {
  x.forEach((at, i) => {
    const rest = Math.exp(-b2! * at);
    out[i] = b1! * (1 - rest) - y[i]!;
    if (!jacobian) return;
    jacobian[2 * i] = 1 - rest;
    jacobian[2 * i + 1] = b1! * at * rest;
  });
};

test.each([
  [500, 0.0001],
  [250, 0.0005],
])('Misra1a from its start b1 = %d, b2 = %d comes to the certified values', (b1, b2) => {
  const { parameters, sumOfSquares, covariance } = leastSquares(misra, [b1, b2], x.length, {
    iterations: 200,
    tolerance: 1e-15,
  });
  expect(parameters[0]! / 238.94212918).toBeCloseTo(1, 8);
  expect(parameters[1]! / 5.5015643181e-4).toBeCloseTo(1, 8);
  expect(sumOfSquares / 0.12455138894).toBeCloseTo(1, 8);
  const variance = sumOfSquares / (x.length - 2);
  expect(Math.sqrt(variance * covariance![0]!) / 2.7070075241).toBeCloseTo(1, 6);
  expect(Math.sqrt(variance * covariance![3]!) / 7.2668688436e-6).toBeCloseTo(1, 6);
});

test('parameters that no residual depends on have no covariance', () => {
  const blind: ResidualFunction = ([a], out, jacobian) => {
    out[0] = a! - 3;
    jacobian?.set([1, 0]);
  };
  expect(leastSquares(blind, [0, 0], 1).covariance).toBeNull();
});
