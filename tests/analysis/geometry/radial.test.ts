import { expect, test } from 'vitest';
import {
  type RadialCoefficients,
  radialFactor,
  radialFactorSlope,
  undistortedHeight,
} from '../../../analysis/geometry/radial.ts';

// check-values.json, distortion_checks (ISO 17850:2015 terms): r′ = r (1 + k r²), 3:2 picture. The top's centre lies at 2/√13 of the half
// diagonal; its local distortion is printed to four decimals.
test.each([
  { k: -0.05, corner: -5, top: -1.5385 },
  { k: -0.02, corner: -2, top: -0.6154 },
  { k: -0.01, corner: -1, top: -0.3077 },
  { k: 0.01, corner: 1, top: 0.3077 },
  { k: 0.02, corner: 2, top: 0.6154 },
  { k: 0.05, corner: 5, top: 1.5385 },
])('k = $k displaces the corner by $corner % and the top by $top %', ({ k, corner, top }) => {
  expect(100 * (radialFactor([k, 0, 0], 1) - 1)).toBeCloseTo(corner, 10);
  expect(100 * (radialFactor([k, 0, 0], 4 / 13) - 1)).toBeCloseTo(top, 4);
});

const lenses: RadialCoefficients[] = [
  [-0.08, 0, 0],
  [0.08, 0, 0],
  [-0.15, 0.06, -0.02],
  [0.1, -0.05, 0.01],
];

test.each(lenses)('the undistorted height is the inverse, k = %d, %d, %d', (...k) => {
  for (const r of [0, 0.01, 0.3, 0.7, 1, 1.2]) {
    const seen = r * radialFactor(k, r * r);
    expect(undistortedHeight(k, seen)).toBeCloseTo(r, 12);
  }
});

test.each(lenses)('the slope is the derivative by r², k = %d, %d, %d', (...k) => {
  const step = 1e-5;
  for (const r2 of [0.1, 0.5, 1]) {
    const rise = radialFactor(k, r2 + step) - radialFactor(k, r2 - step);
    expect(radialFactorSlope(k, r2)).toBeCloseTo(rise / (2 * step), 8);
  }
});

// A barrel r (1 − 0.3 r²) is highest at r = 1/√0.9, where it reaches 2/3 of that.
test('a height that the barrel never reaches gives the height of its largest image', () => {
  expect(undistortedHeight([-0.3, 0, 0], 0.9)).toBeCloseTo(1 / Math.sqrt(0.9), 6);
});
