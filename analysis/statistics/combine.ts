import { studentT } from './student-t.ts';

export interface Repeat {
  readonly value: number;
  /** Standard uncertainty from that photograph alone. */
  readonly uncertainty: number;
}

export interface Combined {
  readonly mean: number;
  readonly standardUncertainty: number;
  /** Infinity when the stated uncertainties outweigh the scatter or there is one repeat. */
  readonly degreesOfFreedom: number;
  /** 95 %: Student's factor for the degrees of freedom, times the standard uncertainty. */
  readonly expanded: number;
  readonly n: number;
}

const coverage = 0.95;

/**
 * Mean of repeats of one measurement (JCGM 100:2008 4.2, G.4).
 * The scatter s/√n is set against what the photographs' own uncertainties predict for their mean; the larger one stands, since the
 * scatter already holds the noise that each photograph states. With few repeats the scatter alone may be small by luck.
 * @throws RangeError without any repeat
 */
export function combineRepeats(repeats: readonly Repeat[]): Combined {
  const n = repeats.length;
  if (n === 0) throw new RangeError('no repeats to combine');
  const mean = repeats.reduce((s, r) => s + r.value, 0) / n;
  const stated = Math.hypot(...repeats.map((r) => r.uncertainty)) / n;
  const scatter = n > 1 ? typeA(repeats.map((r) => r.value)) : 0;
  const standardUncertainty = Math.max(stated, scatter);
  const degreesOfFreedom = scatter > stated ? n - 1 : Number.POSITIVE_INFINITY;
  const expanded = expandedUncertainty(standardUncertainty, degreesOfFreedom);
  return { mean, standardUncertainty, degreesOfFreedom, expanded, n };
}

/** Standard deviation of the mean of n ≥ 2 values, s/√n, with n − 1 degrees of freedom (JCGM 100:2008 4.2.3). */
export function typeA(values: readonly number[]): number {
  const n = values.length;
  const mean = values.reduce((s, v) => s + v, 0) / n;
  const squares = values.reduce((s, v) => s + (v - mean) ** 2, 0);
  return Math.sqrt(squares / (n - 1) / n);
}

/** Half width of the interval that holds the truth with 95 %: t_p(ν) · u; ν is cut to a whole number (JCGM 100:2008 G.4.1). */
export function expandedUncertainty(standardUncertainty: number, degreesOfFreedom: number): number {
  const whole = Number.isFinite(degreesOfFreedom)
    ? Math.max(1, Math.floor(degreesOfFreedom))
    : degreesOfFreedom;
  return studentT(coverage, whole) * standardUncertainty;
}

/** Combined standard uncertainty of independent parts and its effective degrees of freedom (Welch–Satterthwaite, JCGM 100:2008 G.2b). */
export function welchSatterthwaite(
  parts: readonly { readonly uncertainty: number; readonly degreesOfFreedom: number }[],
): { standardUncertainty: number; degreesOfFreedom: number } {
  const standardUncertainty = Math.hypot(...parts.map((p) => p.uncertainty));
  const sum = parts.reduce((s, p) => s + p.uncertainty ** 4 / p.degreesOfFreedom, 0);
  const degreesOfFreedom = sum > 0 ? standardUncertainty ** 4 / sum : Number.POSITIVE_INFINITY;
  return { standardUncertainty, degreesOfFreedom };
}
