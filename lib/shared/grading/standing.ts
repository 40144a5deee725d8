import { type Repeat, typeA } from '@/analysis/statistics/combine';
import { studentCdf } from '@/analysis/statistics/student-t';
import type { Standing } from '../words';
import type { Limits } from './scheme';

/** A result with its standard uncertainty and the degrees of freedom behind it (∞: known well). */
export interface Uncertain {
  value: number;
  standardUncertainty: number;
  degreesOfFreedom: number;
}

/**
 * Probability that the true value lies within the limits, given the result (JCGM 106:2012, 7.2–7.4: no prior knowledge;
 * Student's t in place of the normal distribution when few repeats stand behind the uncertainty).
 * 0…1; exactly 0 or 1 for a count without uncertainty.
 */
export function conformance(
  { value, standardUncertainty: u, degreesOfFreedom }: Uncertain,
  [low, high]: Limits,
) {
  if (u === 0) return (low === null || value >= low) && (high === null || value <= high) ? 1 : 0;
  const below = (limit: number) => studentCdf((limit - value) / u, degreesOfFreedom);
  return (high === null ? 1 : below(high)) - (low === null ? 0 : below(low));
}

/**
 * Where a result stands against limits at a shared risk (JCGM 106:2012, 8.3: guarded acceptance and guarded rejection).
 * For one limit this is a guard band of t(1 − risk)·u: 1.645 u at 5 % when the uncertainty is known well.
 */
export function standingOf(result: Uncertain, limits: Limits, risk: number): Standing {
  const probability = conformance(result, limits);
  if (probability >= 1 - risk) return 'within';
  return probability <= risk ? 'outside' : 'doubt';
}

const mostShots = 12;

/**
 * How many more photographs like these would settle a doubt, if their mean and scatter stayed; null when even a dozen
 * would not.
 */
export function shotsToSettle(
  repeats: readonly Repeat[],
  limits: Limits,
  risk: number,
): number | null {
  const n = repeats.length;
  const value = repeats.reduce((sum, repeat) => sum + repeat.value, 0) / n;
  const stated = Math.hypot(...repeats.map((repeat) => repeat.uncertainty)) / Math.sqrt(n);
  // Of a single photograph the scatter isn't known: what it states of itself stands in.
  const scatter = n > 1 ? typeA(repeats.map((repeat) => repeat.value)) * Math.sqrt(n) : stated;
  for (let more = 1; more <= mostShots; more++) {
    const result: Uncertain = {
      value,
      standardUncertainty: Math.max(stated, scatter) / Math.sqrt(n + more),
      degreesOfFreedom: scatter > stated ? n + more - 1 : Number.POSITIVE_INFINITY,
    };
    if (standingOf(result, limits, risk) !== 'doubt') return more;
  }
  return null;
}
