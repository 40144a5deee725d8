/** A shadow's depth and width from how the light about it rises with distance. */
export interface Shadow {
  /** Share of the light that is missing in the middle, 0…1. */
  readonly depth: number;
  readonly depthUncertainty: number;
  /** Width at half the depth, in the unit of the radii. */
  readonly diameter: number;
  readonly diameterUncertainty: number;
}

/** One ring about the middle: mean light over the background's, and how many pixels stand behind it. */
export interface Ring {
  readonly radius: number;
  readonly light: number;
  readonly weight: number;
}

/** From a Gaussian (2) to a sharp disc: exp(−(r/w)^p). */
const powers = [2, 2.5, 3.2, 4.5, 7];

/**
 * Fits background · (1 − depth · exp(−(r/w)^p)) to the rings, by linear least squares in background and depth for each of a few
 * powers p and widths w. The diameter is twice the radius at half the depth, w (ln 2)^(1/p).
 * @returns null when nothing dark is there
 */
export function fitShadow(rings: readonly Ring[]): Shadow | null {
  const farthest = Math.max(...rings.map(({ radius }) => radius));
  let best: Candidate | null = null;
  for (const power of powers) {
    let low = farthest / 40;
    let high = farthest;
    // Narrowed thrice: from a ninth of the range to a seven-hundredth.
    for (let round = 0; round < 3; round++) {
      const ratio = (high / low) ** (1 / 9);
      const tries = Array.from({ length: 10 }, (_, i) => fitWith(rings, power, low * ratio ** i));
      const local = tries.reduce((a, b) => (b.misfit < a.misfit ? b : a));
      if (!best || local.misfit < best.misfit) best = local;
      low = local.width / ratio;
      high = local.width * ratio;
    }
  }
  if (!best || !(best.depth > 0) || !(best.background > 0)) return null;
  const { depth, background, width, power, variance } = best;
  const relative = Math.sqrt(variance) / depth;
  const diameter = 2 * width * Math.LN2 ** (1 / power);
  return {
    depth: depth / background,
    depthUncertainty: (depth / background) * Math.hypot(relative, 0.02),
    diameter,
    // A width and a depth are known about equally well, relative to their size, from the same rings.
    diameterUncertainty: diameter * Math.hypot(relative, 0.03),
  };
}

interface Candidate {
  readonly power: number;
  readonly width: number;
  readonly background: number;
  readonly depth: number;
  /** Weighted sum of squares left. */
  readonly misfit: number;
  /** Of the depth. */
  readonly variance: number;
}

function fitWith(rings: readonly Ring[], power: number, width: number): Candidate {
  let [s, sb, sbb, sy, sby, syy] = [0, 0, 0, 0, 0, 0];
  for (const { radius, light, weight } of rings) {
    const basis = Math.exp(-((radius / width) ** power));
    s += weight;
    sb += weight * basis;
    sbb += weight * basis * basis;
    sy += weight * light;
    sby += weight * basis * light;
    syy += weight * light * light;
  }
  const determinant = s * sbb - sb * sb;
  if (!(determinant > 1e-9 * s * s))
    return {
      power,
      width,
      background: 0,
      depth: 0,
      misfit: Number.POSITIVE_INFINITY,
      variance: 0,
    };
  const background = (sbb * sy - sb * sby) / determinant;
  const slope = (s * sby - sb * sy) / determinant;
  const misfit = Math.max(0, syy - background * sy - slope * sby);
  const scatter = misfit / Math.max(1, rings.length - 4);
  const variance = (scatter * s) / determinant;
  return { power, width, background, depth: -slope, misfit, variance };
}
