import { expect, test } from 'vitest';
import { type Correspondence, fitLensMap } from '../../../analysis/geometry/fit-lens-map.ts';
import { type LensMap, planeToImage } from '../../../analysis/geometry/lens-map.ts';
import { radialFactor } from '../../../analysis/geometry/radial.ts';
import { createNormal } from '../../../fixtures/scene/random.ts';
import { missing, runPython } from '../../oracles/oracle.ts';

const planted: LensMap = {
  width: 2000,
  height: 1500,
  homography: [1.1e-3, -4e-4, 0.03, 4.2e-4, 1.05e-3, -0.02, 6e-5, -5e-5, 1],
  radial: [-0.06, 0.01, 0],
};
const rough: LensMap = {
  ...planted,
  homography: [1e-3, -3e-4, 0, 3e-4, 1e-3, 0, 0, 0, 1],
  radial: [0, 0, 0],
};
const grid = [-560, -280, 0, 280, 560].flatMap((x) =>
  [-400, -200, 0, 200, 400].map((y) => ({ x, y })),
);
const options = { planeScale: 450, pointError: 0.1 };

function seenThrough(map: LensMap, noise: Float32Array, sigma: number): Correspondence[] {
  return grid.map((plane, i) => {
    const { x, y } = planeToImage(map, plane.x, plane.y);
    return {
      plane,
      image: { x: x + sigma * noise[2 * i]!, y: y + sigma * noise[2 * i + 1]! },
    };
  });
}

function normals(seed: number): Float32Array {
  const out = new Float32Array(2 * grid.length);
  createNormal(seed)(out);
  return out;
}

function largestError(map: LensMap): number {
  return Math.max(
    ...grid.map(({ x, y }) => {
      const found = planeToImage(map, x, y);
      const truth = planeToImage(planted, x, y);
      return Math.hypot(found.x - truth.x, found.y - truth.y);
    }),
  );
}

// Truth by construction. What is left is the pull of the priors, weak beside points good to 0.1 px.
test('a planted map is found from its own points', () => {
  const { map } = fitLensMap(seenThrough(planted, normals(1), 0), rough, options);
  expect(largestError(map)).toBeLessThan(0.01);
});

test('one point in eight may be wrong by 30 px', () => {
  const points = seenThrough(planted, normals(2), 0.05).map((point, i) =>
    i % 8 ? point : { ...point, image: { x: point.image.x + 30, y: point.image.y - 10 } },
  );
  const plain = fitLensMap(points, rough, { ...options, robustRounds: 0 });
  const robust = fitLensMap(points, rough, { ...options, robustRounds: 30 });
  expect(largestError(plain.map)).toBeGreaterThan(3);
  expect(largestError(robust.map)).toBeLessThan(0.3);
});

test('points of lines, each known across its line alone, find the map too', () => {
  const points = seenThrough(planted, normals(3), 0).map((point, i) => ({
    ...point,
    normal: { x: Math.cos(i), y: Math.sin(i) },
  }));
  expect(largestError(fitLensMap(points, rough, options).map)).toBeLessThan(0.05);
});

test('marks that all look larger by 1 % are told from a larger picture', () => {
  const points = grid.flatMap((centre) =>
    [-34, 34].flatMap((dx) =>
      [-34, 34].map((dy) => ({
        plane: { x: centre.x + dx, y: centre.y + dy },
        image: planeToImage(planted, centre.x + 1.01 * dx, centre.y + 1.01 * dy),
        spreadAlong: { x: dx, y: dy },
      })),
    ),
  );
  const fitted = fitLensMap(points, rough, { ...options, fitSpread: true });
  expect(fitted.spread).toBeCloseTo(0.01, 4);
  expect(largestError(fitted.map)).toBeLessThan(0.01);
});

// Independent implementation: OpenCV's findHomography, plain least squares of the reprojection error. No distortion is planted; ours is
// free to find some, so that the two differ by a share of the noise.
test.skipIf(missing('python'))('without distortion the map is the homography of OpenCV', () => {
  const flat: LensMap = { ...planted, radial: [0, 0, 0] };
  const points = seenThrough(flat, normals(4), 0.1);
  const { map } = fitLensMap(points, rough, options);
  const theirs = runPython(
    `import sys, json, numpy, cv2
points = json.loads(sys.argv[1])
h, _ = cv2.findHomography(numpy.array(points[0]), numpy.array(points[1]), 0)
print(json.dumps(cv2.perspectiveTransform(numpy.array([points[0]], float), h)[0].tolist()))`,
    [
      JSON.stringify([
        points.map(({ plane }) => [plane.x, plane.y]),
        points.map(({ image }) => [image.x, image.y]),
      ]),
    ],
  ) as [number, number][];
  grid.forEach(({ x, y }, i) => {
    const ours = planeToImage(map, x, y);
    expect(Math.hypot(ours.x - theirs[i]![0], ours.y - theirs[i]![1])).toBeLessThan(0.15);
  });
});

// Truth by repetition: the scatter of 200 fits to noisy points, so good that the priors don't matter. Its own standard error is 5 %; three of them.
test('the stated uncertainty of the distortion is its scatter', () => {
  const atCorner = (map: LensMap) => radialFactor(map.radial, 0.64);
  const fits = Array.from({ length: 200 }, (_, seed) =>
    fitLensMap(seenThrough(planted, normals(seed), 0.03), planted, {
      ...options,
      pointError: 0.03,
    }),
  );
  const values = fits.map(({ map }) => atCorner(map));
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const scatter = Math.sqrt(
    values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1),
  );
  const stated = fits.reduce((sum, fit) => sum + fit.uncertaintyOf(atCorner), 0) / fits.length;
  expect(Math.abs(stated / scatter - 1)).toBeLessThan(0.15);
});
