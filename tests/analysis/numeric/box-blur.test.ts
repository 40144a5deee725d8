import { expect, test } from 'vitest';
import { deviationOf, doubleBoxBlur } from '../../../analysis/numeric/box-blur.ts';

// Truth: a box of n samples has variance (n² − 1)/12, and variances of filters after one another add.
test.each([3, 5, 7, 11])(
  'an impulse blurred by %d keeps its sum and gets the stated deviation',
  (size) => {
    const side = 41;
    const impulse = new Float32Array(side * side);
    impulse[20 * side + 20] = 1;
    const blurred = doubleBoxBlur(impulse, side, side, size, new Float32Array(side * side));
    let sum = 0;
    let varianceX = 0;
    let varianceY = 0;
    blurred.forEach((value, i) => {
      sum += value;
      varianceX += value * ((i % side) - 20) ** 2;
      varianceY += value * (Math.floor(i / side) - 20) ** 2;
    });
    // Single precision: seven digits, summed over 1681 pixels.
    expect(sum).toBeCloseTo(1, 5);
    expect(Math.sqrt(varianceX)).toBeCloseTo(deviationOf(size), 4);
    expect(Math.sqrt(varianceY)).toBeCloseTo(deviationOf(size), 4);
  },
);

test('a uniform picture stays as it is up to its border', () => {
  const even = new Float32Array(12 * 9).fill(0.25);
  const blurred = doubleBoxBlur(even, 12, 9, 7, new Float32Array(12 * 9));
  for (const value of blurred) expect(value).toBeCloseTo(0.25, 6);
});
