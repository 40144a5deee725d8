import { solveLinear } from '../numeric/linear-solve.ts';
import { labToLinearSrgb, linearSrgbToLab } from './cie.ts';
import { deltaE2000 } from './delta-e-2000.ts';
import { apply, identity, type Triple } from './matrix.ts';

/**
 * The 3 × 3 matrix in linear light that brings the measured colours nearest to their references.
 * Nearest: least squares of the differences in lightness, chroma and hue, each over CIEDE2000's own weight at the reference,
 * by at most three Gauss–Newton steps from the matrix that is best in linear light.
 * @param linear     measured linear sRGB
 * @param references CIELAB D50, as many
 */
export function bestMatrix(
  linear: readonly Triple[],
  references: readonly Triple[],
): readonly number[] {
  let matrix = linearFit(linear, references);
  if (!matrix) return identity;
  let sum = squares(linear, matrix, references);
  for (let step = 0; step < 3; step++) {
    const next = refine(matrix, linear, references);
    const nextSum = next ? squares(linear, next, references) : sum;
    if (!next || nextSum >= sum) break;
    sum = nextSum;
    matrix = next;
  }
  return matrix;
}

function squares(
  linear: readonly Triple[],
  matrix: readonly number[],
  references: readonly Triple[],
): number {
  return linear.reduce((sum, rgb, i) => {
    const error = deltaE2000(linearSrgbToLab(apply(matrix, rgb)), references[i]!);
    return sum + error * error;
  }, 0);
}

/** Row by row: M minimising Σ |M·measured − reference|² in linear sRGB. */
function linearFit(linear: readonly Triple[], references: readonly Triple[]): number[] | null {
  const wanted = references.map(labToLinearSrgb);
  const normal = new Float64Array(9);
  const right = new Float64Array(9);
  linear.forEach((rgb, k) => {
    for (let i = 0; i < 3; i++) {
      for (let j = 0; j < 3; j++) {
        normal[i * 3 + j]! += rgb[i]! * rgb[j]!;
        right[i * 3 + j]! += rgb[i]! * wanted[k]![j]!;
      }
    }
  });
  const solution = solveLinear(normal, right, 3, 3);
  return solution && [0, 1, 2].flatMap((row) => [0, 1, 2].map((col) => solution[col * 3 + row]!));
}

/** One Gauss–Newton step on the nine entries. */
function refine(
  matrix: readonly number[],
  linear: readonly Triple[],
  references: readonly Triple[],
): number[] | null {
  const normal = new Float64Array(81);
  const gradient = new Float64Array(9);
  linear.forEach((rgb, k) => {
    const reference = references[k]!;
    const here = apply(matrix, rgb);
    const residual = weighted(linearSrgbToLab(here), reference);
    // The residual depends on each row's entries only through that row's product, so three slopes serve for nine entries.
    const slopes = [0, 1, 2].map((channel) => {
      const step = 1e-4;
      const moved = here.with(channel, here[channel]! + step) as unknown as Triple;
      const there = weighted(linearSrgbToLab(moved), reference);
      return there.map((value, i) => (value - residual[i]!) / step);
    });
    for (let p = 0; p < 9; p++) {
      const slopeP = slopes[Math.floor(p / 3)]!;
      const factorP = rgb[p % 3]!;
      for (let i = 0; i < 3; i++) gradient[p]! += slopeP[i]! * factorP * residual[i]!;
      for (let q = 0; q < 9; q++) {
        const slopeQ = slopes[Math.floor(q / 3)]!;
        const product = slopeP[0]! * slopeQ[0]! + slopeP[1]! * slopeQ[1]! + slopeP[2]! * slopeQ[2]!;
        normal[p * 9 + q]! += product * factorP * rgb[q % 3]!;
      }
    }
  });
  const step = solveLinear(normal, gradient, 9);
  return step && matrix.map((value, p) => value - step[p]!);
}

/** Differences in lightness, along chroma and along hue over CIEDE2000's weights SL, SC and (its plain part) SH. */
function weighted(lab: Triple, reference: Triple): [number, number, number] {
  const c = Math.hypot(reference[1], reference[2]);
  const cos = c > 0 ? reference[1] / c : 1;
  const sin = c > 0 ? reference[2] / c : 0;
  const dl = lab[0] - reference[0];
  const da = lab[1] - reference[1];
  const db = lab[2] - reference[2];
  const away = (reference[0] - 50) ** 2;
  return [
    dl / (1 + (0.015 * away) / Math.sqrt(20 + away)),
    (cos * da + sin * db) / (1 + 0.045 * c),
    (cos * db - sin * da) / (1 + 0.015 * c),
  ];
}
