import { normalCdf, normalDensity } from '../numeric/normal.ts';

export interface NormalFit {
  readonly mean: number;
  readonly deviation: number;
}

/** Above this share of zeros what is left of the distribution says too little of its middle. Our choice. */
const mostlyBlack = 0.9;

/**
 * Mean and standard deviation of what was rounded to whole codes and cut off at 0: maximum likelihood of a normal distribution of
 * which code k stands for k − ½ … k + ½ and code 0 for all below ½, by expectation and maximisation (Dempster, Laird & Rubin,
 * J. R. Stat. Soc. B 39 (1977) 1, from memory). Without zeros the deviation is the plain one less the rounding's 1/12.
 * @param counts pixels a code, from 0 up
 * @returns the plain mean and deviation of the codes when more than nine in ten are 0, since black is then cut away
 */
export function fitCensoredNormal(counts: ArrayLike<number>): NormalFit {
  const codes = Array.from({ length: counts.length }, (_, code) => code).filter(
    (code) => counts[code]! > 0,
  );
  const total = codes.reduce((sum, code) => sum + counts[code]!, 0);
  if (total === 0) return { mean: 0, deviation: 0 };
  let mean = codes.reduce((sum, code) => sum + counts[code]! * code, 0) / total;
  let variance = codes.reduce((sum, code) => sum + counts[code]! * (code - mean) ** 2, 0) / total;
  if (counts[0]! > mostlyBlack * total || codes.length < 3)
    return { mean, deviation: Math.sqrt(variance) };
  for (let round = 0; round < 3000; round++) {
    const deviation = Math.sqrt(variance);
    let first = 0;
    let second = 0;
    for (const code of codes) {
      const low = code === 0 ? Number.NEGATIVE_INFINITY : (code - 0.5 - mean) / deviation;
      const { z, zz } = momentsBetween(low, (code + 0.5 - mean) / deviation);
      first += counts[code]! * z;
      second += counts[code]! * zz;
    }
    first /= total;
    second /= total;
    mean += deviation * first;
    variance *= second - first * first;
    // Rounding alone never lets a spread below some hundredths of a code be told from none.
    if (variance < 1e-4) return { mean, deviation: 0 };
    if (Math.abs(first) + Math.abs(second - first * first - 1) < 1e-7) break;
  }
  return { mean, deviation: Math.sqrt(variance) };
}

/** Means of z and z² of a standard normal number that lies between two bounds. */
function momentsBetween(low: number, high: number): { z: number; zz: number } {
  const share = normalCdf(high) - normalCdf(low);
  // So far out the differences cancel; the bound nearest the middle stands for the interval.
  if (share < 1e-12) {
    const z = Math.abs(low) < Math.abs(high) ? low : high;
    return { z, zz: z * z };
  }
  const atLow = Number.isFinite(low) ? normalDensity(low) : 0;
  const atHigh = normalDensity(high);
  const lowTerm = Number.isFinite(low) ? low * atLow : 0;
  return { z: (atLow - atHigh) / share, zz: 1 + (lowTerm - high * atHigh) / share };
}
