import type { ChannelTrace, Profile } from '../edge/trace-edges.ts';
import { fastNormalCdf, normalDensity } from '../numeric/normal.ts';
import { solveSpd } from '../numeric/spd.ts';

/** Along the edge's normal toward growing x (or y), px. */
export interface EdgeDisplacement {
  readonly value: number;
  readonly uncertainty: number;
}

/** Unknowns: level, step, slope of the light, blur (two widths), shift (two widths). */
const unknowns = 7;
/** The wide kernel's extra deviation, px: chroma halved in both directions and interpolated back spreads about this far. */
const chromaSpread = 1.2;
/** Shift left after the matched fit, px, before it is seen. */
const shiftSpread = 0.5;

/**
 * How far one channel's edge lies from green's.
 * A matched fit has placed each profile; what is left is the area between them, which no symmetric blur changes. JPEG's halved chroma
 * blurs the difference of two channels but keeps its area, so the area is carried by a narrow and a wide kernel together.
 * @returns null when the profiles overlap too little
 */
export function displacementBetween(
  green: ChannelTrace,
  other: ChannelTrace,
): EdgeDisplacement | null {
  const sigma = Math.min(green.sigma, other.sigma);
  const near = 4 * Math.max(green.sigma, other.sigma) + 4;
  const normal = new Float64Array(unknowns * unknowns);
  const right = new Float64Array(unknowns);
  const row = new Float64Array(unknowns);
  let total = 0;
  const rows = pairBins(green.profile, other.profile, (d, difference, weight) => {
    if (Math.abs(d) > near) return false;
    fillRow(row, d, sigma, green.profile.floor);
    total += weight * difference * difference;
    for (let j = 0; j < unknowns; j++) {
      right[j]! += weight * row[j]! * difference;
      for (let k = 0; k <= j; k++) normal[j * unknowns + k]! += weight * row[j]! * row[k]!;
    }
    return true;
  });
  if (rows < unknowns + 12) return null;
  const area = solveArea(normal, right, total, rows);
  if (!area) return null;
  return { value: other.shift - green.shift + area.value, uncertainty: area.uncertainty };
}

function fillRow(row: Float64Array, d: number, sigma: number, floor: number): void {
  const wide = Math.hypot(sigma, chromaSpread);
  const rise = fastNormalCdf(d / sigma);
  const narrowKernel = normalDensity(d / sigma) / sigma;
  const wideKernel = normalDensity(d / wide) / wide;
  row[0] = 1;
  row[1] = rise;
  row[2] = (d / 10) * (floor + rise);
  row[3] = (narrowKernel * d) / sigma;
  row[4] = (wideKernel * d) / wide;
  row[5] = -narrowKernel;
  row[6] = -wideKernel;
}

function solveArea(
  normal: Float64Array,
  right: Float64Array,
  total: number,
  rows: number,
): EdgeDisplacement | null {
  let noise = 0.02;
  let value = 0;
  let variance = 0;
  for (let pass = 0; pass < 2; pass++) {
    const precision = 1 / noise ** 2;
    const inverse = normal.map((v) => v * precision);
    const c = right.map((v) => v * precision);
    for (let j = 0; j < unknowns; j++) inverse[j * unknowns + j]! += 1 / shiftSpread ** 2;
    if (!solveSpd(inverse, c)) return null;
    value = c[5]! + c[6]!;
    variance =
      inverse[5 * unknowns + 5]! + inverse[6 * unknowns + 6]! + 2 * inverse[5 * unknowns + 6]!;
    let squares = total;
    for (let j = 0; j < unknowns; j++) {
      squares -= 2 * c[j]! * right[j]!;
      for (let k = 0; k < unknowns; k++)
        squares += c[j]! * c[k]! * normal[j >= k ? j * unknowns + k : k * unknowns + j]!;
    }
    noise = Math.max(2e-4, Math.sqrt(Math.max(0, squares) / (rows - unknowns)));
  }
  return { value, uncertainty: Math.sqrt(variance) };
}

/** Calls `use` for each bin that both profiles fill, with the weight of their difference; returns how many it took. */
function pairBins(
  green: Profile,
  other: Profile,
  use: (distance: number, difference: number, weight: number) => boolean,
): number {
  // Reaches differ with the blur, so that bins are matched by distance.
  const offset = Math.round((other.reach - green.reach) * 8);
  let j = 0;
  let rows = 0;
  for (let i = 0; i < green.bin.length; i++) {
    const bin = green.bin[i]! + offset;
    while (j < other.bin.length && other.bin[j]! < bin) j++;
    if (j === other.bin.length) break;
    if (other.bin[j] !== bin) continue;
    const n = green.pixels[i]!;
    const m = other.pixels[j]!;
    const d = (green.distance[i]! + other.distance[j]!) / 2;
    if (use(d, other.value[j]! - green.value[i]!, (n * m) / (n + m))) rows++;
  }
  return rows;
}
