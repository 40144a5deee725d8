import type { Frame } from '../image.ts';
import type { Metric, Warning } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { measureSpot, type Spot } from './measure-spot.ts';

/** Signal-to-noise changes with light as light^½ when photons make the noise; how far a camera's processing may depart from that. */
const photonSlope = -1;
const slopeSpread = 0.6;
/** The spots nearest the middle set the light at which the figure is given. */
const centreSpots = 4;
/** Share of the spots' radius that is used: their rims stay clear of what is printed beside them. */
const inset = 0.85;
const fewestSpots = 4;

/**
 * Signal-to-noise ratio at mid grey, dB: 20 log10(mean / σ) of luminance in the file's linear light on the plain background (18 %),
 * following ISO 15739 for one exposure. Slow gradients are removed from each spot, and what rounding to codes adds:
 * the figure tells of the camera, not of the file's depth. Noise too faint for that is given as the most it can be, with more doubt.
 * Given for the light at the target's middle, the spots further out being told apart by how much light they got.
 * @returns no metric and a warning when fewer than 4 spots are in the frame, unclipped and large enough
 */
export function measureNoise(
  frame: Frame,
  registration: Registration,
): { metrics: Metric[]; warnings: Warning[] } {
  const spots: PlacedSpot[] = [];
  for (const { x, y, radius } of registration.target.plain) {
    const at = registration.toImage(x, y);
    const rim = registration.toImage(x + radius * inset, y);
    const spot = measureSpot(frame, at, Math.hypot(rim.x - at.x, rim.y - at.y));
    if (spot) spots.push({ spot, fromMiddle: Math.hypot(x, y) });
  }
  const metric = snrOf(spots);
  return metric
    ? { metrics: [metric], warnings: [] }
    : { metrics: [], warnings: [tooFew(spots.length)] };
}

export interface PlacedSpot {
  readonly spot: Spot;
  /** Distance from the middle, any unit. */
  readonly fromMiddle: number;
}

/** noise.snr for the light of the spots nearest the middle, from all of them; null with fewer than four. */
export function snrOf(placed: readonly PlacedSpot[]): Metric | null {
  if (placed.length < fewestSpots) return null;
  const spots = placed.toSorted((a, b) => a.fromMiddle - b.fromMiddle);
  const middle = spots.slice(0, centreSpots).map(({ spot }) => Math.log(spot.mean));
  const reference = middle.reduce((s, v) => s + v, 0) / middle.length;
  const { logVariance, uncertainty } = atLight(
    spots.map(({ spot }) => spot),
    reference,
  );
  const toDecibel = 10 / Math.LN10;
  return {
    name: 'noise.snr',
    value: -toDecibel * logVariance,
    unit: 'dB',
    uncertainty: toDecibel * uncertainty,
  };
}

/** Relative uncertainty of the variance that averaging doesn't lessen. Our choice: about 0.1 dB. */
const systematic = 0.025;

/** Weighted line through log relative variance against log light, its slope held near the photons'; the value at `reference`. */
function atLight(
  spots: readonly Spot[],
  reference: number,
): { logVariance: number; uncertainty: number } {
  let [s, sx, sxx, sy, sxy] = [0, 0, 1 / slopeSpread ** 2, 0, photonSlope / slopeSpread ** 2];
  for (const spot of spots) {
    const weight = spot.freedom / 2;
    const x = Math.log(spot.mean) - reference;
    const y = Math.log(spot.variance / spot.mean ** 2) + 1 / spot.freedom;
    s += weight;
    sx += weight * x;
    sxx += weight * x * x;
    sy += weight * y;
    sxy += weight * x * y;
  }
  const determinant = s * sxx - sx * sx;
  const logVariance = (sxx * sy - sx * sxy) / determinant;
  const slope = (s * sxy - sx * sy) / determinant;
  let misfit = 0;
  for (const spot of spots) {
    const x = Math.log(spot.mean) - reference;
    const y = Math.log(spot.variance / spot.mean ** 2) + 1 / spot.freedom;
    misfit += (spot.freedom / 2) * (y - logVariance - slope * x) ** 2;
  }
  const roundingDoubt = spots.reduce((sum, spot) => sum + spot.roundingShare, 0) / spots.length;
  const widen = Math.max(1, misfit / (spots.length - 1));
  return {
    logVariance,
    uncertainty: Math.hypot(Math.sqrt((widen * sxx) / determinant), systematic, roundingDoubt),
  };
}

function tooFew(found: number): Warning {
  return {
    code: 'noise-spots',
    message: `Noise needs ${fewestSpots} plain spots in the frame, unclipped; ${found} could be used. Frame the whole target and expose it between black and white.`,
  };
}
