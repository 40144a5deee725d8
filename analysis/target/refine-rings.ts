import { type LensMap, lensMapJacobian, planeToImage } from '../geometry/lens-map.ts';
import type { Frame, Point } from '../image.ts';
import { sampleLinearGreen } from './sample.ts';
import type { Target } from './target.ts';

export interface RefinedRing {
  readonly id: string;
  readonly printed: Point;
  readonly found: Point;
}

const rounds = 6;
const angleCount = 24; // half a turn: each sample is compared with the one across the centre
// A dark annulus on a light disc: between its lightest and darkest part a real ring has at least this share of the lightest.
const leastContrast = 0.3;

/**
 * The rings' centres as centres of point symmetry in the map's own coordinates: the shift that makes each reading equal to the one
 * across the centre, by Gauss and Newton. Neither blur, tone curve nor clipping moves that. Rings that aren't seen whole are left out.
 */
export function refineRings(frame: Frame, map: LensMap, target: Target): RefinedRing[] {
  const radii = sampleRadii(target.ring.discRadius);
  const rings: RefinedRing[] = [];
  for (const ring of target.rings) {
    const found = symmetryCentre(frame, map, ring, radii);
    if (found) {
      rings.push({ id: ring.id, printed: { x: ring.x, y: ring.y }, found });
    }
  }
  return rings;
}

/** Every 2 units, up to where the disc's own edge ends: beyond it the surroundings are not symmetric. */
function sampleRadii(discRadius: number): number[] {
  const radii: number[] = [];
  for (let radius = 3; radius <= discRadius - 2; radius += 2) radii.push(radius);
  return radii;
}

function symmetryCentre(
  frame: Frame,
  map: LensMap,
  start: Point,
  radii: readonly number[],
): Point | null {
  let centre: Point = { x: start.x, y: start.y };
  const reach = radii.at(-1)!;
  for (let round = 0; round < rounds; round++) {
    const step = symmetryStep(frame, map, centre, radii);
    if (!step) return null;
    centre = { x: centre.x + step.x, y: centre.y + step.y };
    if (Math.hypot(centre.x - start.x, centre.y - start.y) > reach / 4) return null;
    // The steps shrink by a factor of ten and more each, so that the next one would be a few thousandths of a pixel.
    if (Math.hypot(step.x, step.y) < 5e-3) break;
  }
  return planeToImage(map, centre.x, centre.y);
}

function symmetryStep(
  frame: Frame,
  map: LensMap,
  centre: Point,
  radii: readonly number[],
): Point | null {
  const at = planeToImage(map, centre.x, centre.y);
  const [a, b, c, d] = lensMapJacobian(map, centre.x, centre.y);
  // Slopes are taken over a pixel or so each way.
  const h = 1 / Math.sqrt(Math.abs(a * d - b * c));
  const read = (u: number, v: number) =>
    sampleLinearGreen(frame, at.x + a * u + b * v, at.y + c * u + d * v);
  let uu = 0;
  let uv = 0;
  let vv = 0;
  let ue = 0;
  let ve = 0;
  let least = Number.POSITIVE_INFINITY;
  let most = 0;
  for (const radius of radii) {
    for (let k = 0; k < angleCount; k++) {
      const angle = (Math.PI * k) / angleCount;
      const u = radius * Math.cos(angle);
      const v = radius * Math.sin(angle);
      const here = read(u, v);
      const across = read(-u, -v);
      const slopeU =
        (read(u + h, v) - read(u - h, v) - read(-u + h, -v) + read(-u - h, -v)) / (2 * h);
      const slopeV =
        (read(u, v + h) - read(u, v - h) - read(-u, -v + h) + read(-u, -v - h)) / (2 * h);
      const error = here - across;
      uu += radius * slopeU * slopeU;
      uv += radius * slopeU * slopeV;
      vv += radius * slopeV * slopeV;
      ue += radius * slopeU * error;
      ve += radius * slopeV * error;
      least = Math.min(least, here, across);
      most = Math.max(most, here, across);
    }
  }
  const determinant = uu * vv - uv * uv;
  if (!(most - least > leastContrast * most) || !(determinant > 0)) return null;
  return { x: -(vv * ue - uv * ve) / determinant, y: -(uu * ve - uv * ue) / determinant };
}
