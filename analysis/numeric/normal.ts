/**
 * Standard normal distribution function Φ(z).
 * Absolute error below 1e-15 (series and continued fraction of erfc, Abramowitz & Stegun 7.1.6 and 7.1.14).
 */
export function normalCdf(z: number): number {
  const x = Math.abs(z) / Math.SQRT2;
  const tail = x < 2.5 ? 0.5 * (1 - erfSeries(x)) : 0.5 * erfcFraction(x);
  return z > 0 ? 1 - tail : tail;
}

/** Standard normal density. */
export function normalDensity(z: number): number {
  return Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI);
}

/** Inverse of `normalCdf` for 0 < p < 1, by Newton steps in the tail where it is smooth. */
export function normalQuantile(p: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`probability ${p} is not between 0 and 1`);
  if (p > 0.5) return -normalQuantile(1 - p);
  let z = p > 0.02 ? (p - 0.5) * Math.sqrt(2 * Math.PI) : -Math.sqrt(-2 * Math.log(p));
  for (let i = 0; i < 60; i++) {
    // Halley's step on log Φ keeps the far tail from overshooting.
    const ratio = normalDensity(z) / normalCdf(z);
    const step = Math.log(normalCdf(z) / p) / ratio;
    const next = z - step / (1 + 0.5 * step * (z + ratio));
    if (Math.abs(next - z) < 1e-14 * (1 + Math.abs(z))) return next;
    z = next;
  }
  return z;
}

function erfSeries(x: number): number {
  let term = x;
  let sum = x;
  for (let n = 1; n < 80; n++) {
    term *= (2 * x * x) / (2 * n + 1);
    sum += term;
    if (term < 1e-17 * sum) break;
  }
  return (2 / Math.sqrt(Math.PI)) * Math.exp(-x * x) * sum;
}

function erfcFraction(x: number): number {
  let fraction = x;
  for (let n = 60; n > 0; n--) fraction = x + n / 2 / fraction;
  return Math.exp(-x * x) / Math.sqrt(Math.PI) / fraction;
}

const reach = 6;
const perUnit = 512;
const table = Float64Array.from({ length: 2 * reach * perUnit + 2 }, (_, i) =>
  normalCdf(i / perUnit - reach),
);

const densityTable = Float64Array.from({ length: 2 * reach * perUnit + 2 }, (_, i) =>
  normalDensity(i / perUnit - reach),
);

/** The standard normal density from a table, for inner loops; absolute error below 2e-7. */
export function fastNormalDensity(z: number): number {
  if (z <= -reach || z >= reach) return 0;
  const at = (z + reach) * perUnit;
  const cell = at | 0;
  const low = densityTable[cell]!;
  return low + (densityTable[cell + 1]! - low) * (at - cell);
}

/** Φ from a table, for inner loops; absolute error below 2e-7. */
export function fastNormalCdf(z: number): number {
  if (z <= -reach) return 0;
  if (z >= reach) return 1;
  const at = (z + reach) * perUnit;
  const cell = at | 0;
  const low = table[cell]!;
  return low + (table[cell + 1]! - low) * (at - cell);
}
