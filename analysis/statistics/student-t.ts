import { normalCdf, normalQuantile } from '../numeric/normal.ts';

/**
 * Factor t for which a Student t variable of `nu` degrees of freedom lies within ±t with probability `p`
 * (JCGM 100:2008 Table G.2; two-sided).
 * @param nu  1 or more, whole or not; Infinity gives the normal factor
 */
export function studentT(p: number, nu: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`probability ${p} is not between 0 and 1`);
  if (!(nu >= 1)) throw new RangeError(`degrees of freedom ${nu} are fewer than 1`);
  if (nu > 1e7) return normalQuantile(0.5 + p / 2);
  // P(|T| > t) is the incomplete beta function I_x(ν/2, 1/2) at x = ν/(ν + t²), which falls as t grows.
  let low = 0;
  let high = 1;
  while (withinT(high, nu) < p) high *= 2;
  for (let i = 0; i < 200 && high - low > 1e-13 * high; i++) {
    const middle = (low + high) / 2;
    if (withinT(middle, nu) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** P(T ≤ t) for a Student t variable; `nu` may be Infinity. */
export function studentCdf(t: number, nu: number): number {
  if (nu > 1e7) return normalCdf(t);
  const within = withinT(Math.abs(t), nu);
  return t > 0 ? 0.5 + within / 2 : 0.5 - within / 2;
}

/** P(|T| ≤ t). */
function withinT(t: number, nu: number): number {
  return 1 - incompleteBeta(nu / (nu + t * t), nu / 2, 0.5);
}

/** Regularised incomplete beta function by its continued fraction (Abramowitz & Stegun 26.5.8, evaluated by Lentz's method). */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const logFront =
    logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x);
  return (Math.exp(logFront) * betaFraction(x, a, b)) / a;
}

function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  let c = 1;
  let d = 1 / guard(1 - ((a + b) * x) / (a + 1), tiny);
  let result = d;
  for (let m = 1; m < 1000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / guard(1 + even * d, tiny);
    c = guard(1 + even / c, tiny);
    result *= c * d;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / guard(1 + odd * d, tiny);
    c = guard(1 + odd / c, tiny);
    result *= c * d;
    if (Math.abs(c * d - 1) < 1e-15) break;
  }
  return result;
}

function guard(value: number, tiny: number): number {
  return Math.abs(value) < tiny ? tiny : value;
}

/** Stirling's series after shifting the argument past 10 (Abramowitz & Stegun 6.1.41); x > 0. */
function logGamma(x: number): number {
  let shift = 0;
  let y = x;
  while (y < 10) shift += Math.log(y++);
  const inverse = 1 / y;
  const square = inverse * inverse;
  const series =
    inverse * (1 / 12 - square * (1 / 360 - square * (1 / 1260 - square * (1 / 1680))));
  return (y - 0.5) * Math.log(y) - y + 0.5 * Math.log(2 * Math.PI) + series - shift;
}
