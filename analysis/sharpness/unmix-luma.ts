import { fitProfile, type ProfileFit, spreadAt } from '../edge/fit-profile.ts';
import type { Luma } from '../edge/luma.ts';
import type { ChannelTrace, EdgeTrace, Profile } from '../edge/trace-edges.ts';
import type { Point } from '../image.ts';

/** Displacement of the red and the blue image against the green at a station, px. */
export interface ChannelShifts {
  readonly red: Point;
  readonly blue: Point;
}

type LumaEdge = EdgeTrace & { readonly luma: ChannelTrace };

/** JFIF's weights of red, green and blue codes in luma (ITU-T T.871). */
const weights = [0.299, 0.587, 0.114] as const;
const passes = 3;
/** Spread of the channels' displacements, px², that blurs luma by less than a thousandth. */
const negligible = 1e-3;

export function hasLuma(edge: EdgeTrace): edge is LumaEdge {
  return edge.luma !== null;
}

/**
 * Halved chroma leaks into green: G = Y − 0.344 Cb − 0.714 Cr, so a green edge beside displaced colour is neither sharp nor green.
 * Luma is whole, and is red, green and blue of the same sharpness at displacements that are known. What the displacements do to
 * a spread is taken from the profiles and the spread fitted again, until it agrees with them.
 */
export function fitUnmixed(
  edges: readonly LumaEdge[],
  luma: Luma,
  shifts: ChannelShifts,
): ProfileFit | null {
  const sigma = edges.reduce((s, e) => s + e.luma.sigma, 0) / edges.length;
  const spread = spreadOfShifts(edges, shifts);
  let fit = fitProfile(
    edges.map((e) => e.luma.profile),
    sigma,
  );
  if (spread < negligible) return fit;
  const own = Math.sqrt(Math.max(sigma ** 2 - spread, (0.5 * sigma) ** 2));
  for (let pass = 0; pass < passes && fit; pass++) {
    const before: ProfileFit = fit;
    fit = fitProfile(
      edges.map((e) => unmixed(e, luma, before, alongNormal(e, shifts))),
      own,
    );
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

function unmixed(edge: LumaEdge, luma: Luma, fit: ProfileFit, shifts: readonly number[]): Profile {
  const { profile, step, sigma } = edge.luma;
  // Falling edges are kept upside down, see edge/.
  const sign = profile.floor < 0 ? -1 : 1;
  const lightAt = (d: number) => sign * (profile.floor + spreadAt(fit, d)) * step;
  const reach = 5 * sigma + 2;
  const value = profile.value.map((v, i) => {
    const d = profile.distance[i]!;
    if (Math.abs(d) > reach) return v;
    const [red, green, blue] = shifts.map((shift) => lightAt(d - shift)) as [
      number,
      number,
      number,
    ];
    const mixed = (sign * luma.mix(red, green, blue)) / step - profile.floor;
    return v + spreadAt(fit, d) - mixed;
  });
  return { ...profile, value };
}
