import {
  type Copies,
  designFit,
  fitProfile,
  fitValues,
  type ProfileFit,
  spreadAt,
} from '../edge/fit-profile.ts';
import type { Luma } from '../edge/luma.ts';
import type { ChannelTrace, EdgeTrace } from '../edge/trace-edges.ts';
import type { Point } from '../image.ts';

/** Displacement of the red and the blue image against the green at a station, px. */
export interface ChannelShifts {
  readonly red: Point;
  readonly blue: Point;
}

type LumaEdge = EdgeTrace & { readonly luma: ChannelTrace };

/** JFIF's weights of red, green and blue codes in luma (ITU-T T.871). */
const weights = [0.299, 0.587, 0.114] as const;
const passes = 2;
/** Spread of the channels' displacements, px², that blurs luma by less than a thousandth. */
const negligible = 1e-3;

export function hasLuma(edge: EdgeTrace): edge is LumaEdge {
  return edge.luma !== null;
}

/**
 * Halved chroma leaks into green: G = Y − 0.344 Cb − 0.714 Cr, so a green edge beside displaced colour is neither sharp nor green.
 * Luma is whole, and is red, green and blue of the same sharpness at displacements that are known: three copies of one spread, which
 * is fitted to their sum. Codes add up, not light; what that changes is taken from the profiles with the spread as fitted before.
 */
export function fitUnmixed(
  edges: readonly LumaEdge[],
  luma: Luma,
  shifts: ChannelShifts,
): ProfileFit | null {
  const sigma = edges.reduce((s, e) => s + e.luma.sigma, 0) / edges.length;
  const profiles = edges.map((e) => e.luma.profile);
  const spread = spreadOfShifts(edges, shifts);
  if (spread < negligible) return fitProfile(profiles, sigma);
  const own = Math.sqrt(Math.max(sigma ** 2 - spread, (0.5 * sigma) ** 2));
  const copies = edges.map(
    (edge): Copies => alongNormal(edge, shifts).map((at, i) => ({ at, weight: weights[i]! })),
  );
  const design = designFit(profiles, own, copies);
  const values = profiles.map((profile) => profile.value);
  let fit = fitValues(design, values);
  for (let pass = 0; pass < passes && fit; pass++) {
    const before: ProfileFit = fit;
    const added = edges.map((edge, i) => addedLight(edge, luma, before, copies[i]!));
    fit = fitValues(design, added);
  }
  return fit;
}

/** Variance of the displacements along the edges' normal, each with its channel's weight in luma, px². */
export function spreadOfShifts(edges: readonly EdgeTrace[], shifts: ChannelShifts): number {
  const each = edges.map((edge) => {
    const along = alongNormal(edge, shifts);
    return along.reduce((sum, d, i) => sum + weights[i]! * d * d, 0);
  });
  return each.reduce((sum, v) => sum + v, 0) / each.length;
}

/** Of red, green and blue against their weighted mean, where luma's edge lies. */
function alongNormal({ normal }: EdgeTrace, { red, blue }: ChannelShifts): number[] {
  const r = red.x * normal.x + red.y * normal.y;
  const b = blue.x * normal.x + blue.y * normal.y;
  const mean = weights[0] * r + weights[2] * b;
  return [r - mean, -mean, b - mean];
}

/** The profile's values as they would be if light were added up in place of codes. */
function addedLight(edge: LumaEdge, luma: Luma, fit: ProfileFit, copies: Copies): Float64Array {
  const { profile, step, sigma } = edge.luma;
  const { distance, floor } = profile;
  const [{ at: r, weight: ofRed }, { at: g, weight: ofGreen }, { at: b, weight: ofBlue }] =
    copies as [Copies[number], Copies[number], Copies[number]];
  // Falling edges are kept upside down, see edge/.
  const sign = floor < 0 ? -1 : 1;
  const scale = sign * step;
  const reach = 5 * sigma + 2;
  const value = profile.value.slice();
  for (let i = 0; i < value.length; i++) {
    const d = distance[i]!;
    if (d > reach || d < -reach) continue;
    const red = spreadAt(fit, d - r);
    const green = spreadAt(fit, d - g);
    const blue = spreadAt(fit, d - b);
    const mixed = luma.mix(scale * (floor + red), scale * (floor + green), scale * (floor + blue));
    value[i]! += ofRed * red + ofGreen * green + ofBlue * blue - (mixed / scale - floor);
  }
  return value;
}
