/** Middle value; the mean of the two middle ones when their number is even. */
export function median(values: readonly number[]): number {
  if (values.length === 0) throw new RangeError('no values to take the median of');
  const sorted = values.toSorted((a, b) => a - b);
  const half = sorted.length >> 1;
  return sorted.length % 2 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2;
}

/**
 * How far each value lies from the median, in robust standard deviations (1.4826 · MAD; when more than half are equal, 1.2533 · mean
 * absolute deviation). Beyond 3.5 is commonly taken for an outlier (Iglewicz & Hoaglin 1993, from memory). All 0 when all are equal.
 */
export function modifiedZScores(values: readonly number[]): number[] {
  if (values.length === 0) return [];
  const middle = median(values);
  const deviations = values.map((v) => Math.abs(v - middle));
  const mad = 1.482602 * median(deviations);
  const meanDeviation = (1.253314 * deviations.reduce((s, d) => s + d, 0)) / values.length;
  const scale = mad > 0 ? mad : meanDeviation;
  return values.map((v) => (scale > 0 ? (v - middle) / scale : 0));
}
