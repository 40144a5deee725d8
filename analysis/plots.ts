import type { FringeResult } from './chromatic/measure-fringes.ts';
import type { DiscSample } from './colour/disc-sample.ts';
import type { Frame, Point } from './image.ts';
import type { Plots, StationPlot } from './result.ts';
import type { SharpnessResult } from './sharpness/measure-sharpness.ts';
import type { Registration } from './target/registration.ts';

const pointsPerSide = 10;

/** The field's border in image pixels, clockwise from its top-left corner; ten points a side show the distortion. */
export function plotOutline(registration: Registration): Point[] {
  const { width, height } = registration.target;
  const corners = [
    [-width / 2, -height / 2],
    [width / 2, -height / 2],
    [width / 2, height / 2],
    [-width / 2, height / 2],
  ] as const;
  return corners.flatMap(([x, y], i) => {
    const [toX, toY] = corners[(i + 1) % 4]!;
    return Array.from({ length: pointsPerSide }, (_, k) => {
      const share = k / pointsPerSide;
      return registration.toImage(x + share * (toX - x), y + share * (toY - y));
    });
  });
}

export function plotDiscs(samples: readonly DiscSample[]): NonNullable<Plots['discs']> {
  return samples.map(({ disc, x, y, radius }) => ({ id: disc.id, x, y, radius }));
}

/** Every station whose centre lies in the frame, with what was measured there. */
export function plotStations(
  frame: Frame,
  registration: Registration,
  sharpness: Pick<SharpnessResult, 'curves' | 'mtf50'>,
  fringes: Pick<FringeResult, 'red' | 'blue'>,
): StationPlot[] {
  const { padRadius } = registration.target.station;
  return registration.target.stations.flatMap(({ id, x, y }) => {
    const centre = registration.toImage(x, y);
    const inside =
      centre.x > 0 && centre.y > 0 && centre.x < frame.width && centre.y < frame.height;
    if (!inside) return [];
    const [a, b, c, d] = registration.jacobian(x, y);
    return [
      {
        id,
        x: centre.x,
        y: centre.y,
        radius: padRadius * Math.sqrt(Math.abs(a * d - b * c)),
        corners: [...(registration.corners.get(id) ?? [])],
        curves: sharpness.curves.get(id) ?? [],
        mtf50: sharpness.mtf50.get(id) ?? null,
        red: fringes.red.get(id) ?? null,
        blue: fringes.blue.get(id) ?? null,
      },
    ];
  });
}
