import type { Displaced, NaturalEdge } from '../edge/trace-natural-edge.ts';
import type { Frame } from '../image.ts';
import { solveSpd } from '../numeric/spd.ts';
import type { Metric } from '../result.ts';

/** What a single natural edge is off by beyond its lines' own scatter, px: colours that change along it. Our choice. */
const doubt = 0.04;
const fewestEdges = 12;
/** What tone, texture and halved chroma leave in all edges alike: ‰, and as a share. Found by rendering. */
const systematic = { fixed: 0.03, share: 0.12 };
/** Residuals beyond this many standard deviations count ever less (Huber). */
const huber = 1.5;

/**
 * scene.fringeRed, scene.fringeBlue, ‰: magnification of red and blue against green, from n · (shift + k · (place − frame's centre)) fitted
 * to the displacements of natural edges along their normals n, by iteratively reweighted least squares. Left out with fewer than twelve.
 */
export function fitNaturalFringes(frame: Frame, edges: readonly NaturalEdge[]): Metric[] {
  return [
    ...magnification(frame, edges, 'scene.fringeRed', (edge) => edge.red),
    ...magnification(frame, edges, 'scene.fringeBlue', (edge) => edge.blue),
  ];
}

interface Row {
  readonly basis: readonly [number, number, number];
  readonly value: number;
  readonly sigma: number;
}

function magnification(
  frame: Frame,
  edges: readonly NaturalEdge[],
  name: string,
  pick: (edge: NaturalEdge) => Displaced | null,
): Metric[] {
  const half = Math.hypot(frame.width, frame.height) / 2;
  const rows = edges.flatMap((edge): Row[] => {
    const displaced = pick(edge);
    // Two pixels apart is two edges, not one edge's fringe.
    if (!displaced || Math.abs(displaced.value) > 3) return [];
    const { x, y, nx, ny } = edge;
    const radial = (nx * (x - frame.width / 2) + ny * (y - frame.height / 2)) / half;
    const sigma = Math.hypot(displaced.uncertainty, doubt);
    return [{ basis: [nx, ny, radial], value: displaced.value, sigma }];
  });
  if (rows.length < fewestEdges) return [];
  let weights = rows.map(() => 1);
  for (let round = 0; ; round++) {
    const solved = solveWeighted(rows, weights);
    if (!solved) return [];
    const residuals = rows.map(
      ({ basis, value, sigma }) =>
        (value - basis.reduce((s, b, j) => s + b * solved.solution[j]!, 0)) / sigma,
    );
    const sizes = residuals.map(Math.abs).sort((a, b) => a - b);
    const spread = Math.max(1, 1.4826 * sizes[sizes.length >> 1]!);
    if (round === 8) {
      // k is in px at half the diagonal.
      const scatter = (1000 * Math.sqrt(solved.covariance[8]!) * spread) / half;
      const value = (1000 * solved.solution[2]!) / half;
      const uncertainty = Math.hypot(scatter, systematic.fixed, systematic.share * value);
      return [{ name, value, unit: '‰', uncertainty }];
    }
    weights = residuals.map((r) => Math.min(1, (huber * spread) / Math.max(Math.abs(r), 1e-9)));
  }
}

function solveWeighted(
  rows: readonly Row[],
  weights: readonly number[],
): { solution: Float64Array; covariance: Float64Array } | null {
  const normal = new Float64Array(9);
  const right = new Float64Array(3);
  rows.forEach(({ basis, value, sigma }, i) => {
    const weight = weights[i]! / sigma ** 2;
    for (let j = 0; j < 3; j++) {
      right[j]! += weight * basis[j]! * value;
      for (let k = 0; k <= j; k++) normal[j * 3 + k]! += weight * basis[j]! * basis[k]!;
    }
  });
  return solveSpd(normal, right) ? { solution: right, covariance: normal } : null;
}
