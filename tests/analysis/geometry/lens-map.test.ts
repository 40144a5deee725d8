import { expect, test } from 'vitest';
import {
  imageToPlane,
  inverseOf,
  type LensMap,
  lensMapJacobian,
  planeToImage,
} from '../../../analysis/geometry/lens-map.ts';

const map: LensMap = {
  width: 4000,
  height: 3000,
  homography: [1.1e-3, -4e-4, 0.03, 4.2e-4, 1.05e-3, -0.02, 9e-5, -5e-5, 1],
  radial: [-0.08, 0.01, 0],
};
const places = [-600, -300, 0, 450, 600].flatMap((x) => [-450, -20, 450].map((y) => [x, y]));

test('image to plane is the inverse of plane to image to a millionth', () => {
  const inverse = inverseOf(map);
  for (const [x, y] of places) {
    const seen = planeToImage(map, x!, y!);
    const back = imageToPlane(map, inverse, seen.x, seen.y);
    expect(Math.hypot(back.x - x!, back.y - y!)).toBeLessThan(1e-6);
  }
});

test('the Jacobian is the derivative', () => {
  const step = 1e-3;
  for (const [x, y] of places) {
    const [a, b, c, d] = lensMapJacobian(map, x!, y!);
    const right = planeToImage(map, x! + step, y!);
    const left = planeToImage(map, x! - step, y!);
    const below = planeToImage(map, x!, y! + step);
    const above = planeToImage(map, x!, y! - step);
    expect(a).toBeCloseTo((right.x - left.x) / (2 * step), 5);
    expect(b).toBeCloseTo((below.x - above.x) / (2 * step), 5);
    expect(c).toBeCloseTo((right.y - left.y) / (2 * step), 5);
    expect(d).toBeCloseTo((below.y - above.y) / (2 * step), 5);
  }
});

test('a map that lays the plane on a line has no inverse', () => {
  expect(() => inverseOf({ ...map, homography: [1, 1, 0, 1, 1, 0, 0, 0, 1] })).toThrow(RangeError);
});
