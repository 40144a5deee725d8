import { type ProfileFit, responseAt, spreadAt } from '../edge/fit-profile.ts';
import { quadraticForm } from '../numeric/spd.ts';

/** A value and its standard uncertainty from the profile's own noise. */
export interface Estimate {
  readonly value: number;
  readonly uncertainty: number;
}

/** Beyond this, in cy/px, no crossing is looked for: a sampled picture says nothing there. */
const highest = 0.75;

/**
 * First frequency at which the SFR falls to `level` (ISO 12233: the first crossing), cy/px.
 * @returns null when it stays above `level` up to 0.75 cy/px
 */
export function crossing(fit: ProfileFit, level: number): Estimate | null {
  const step = 0.01;
  let before = 1;
  for (let f = step; f <= highest; f += step) {
    const here = responseAt(fit, f);
    if (here <= level && before > level) return refine(fit, level, f - step, f);
    before = here;
  }
  return null;
}

function refine(fit: ProfileFit, level: number, from: number, to: number): Estimate {
  let low = from;
  let high = to;
  for (let i = 0; i < 30; i++) {
    const middle = (low + high) / 2;
    if (responseAt(fit, middle) > level) low = middle;
    else high = middle;
  }
  const value = (low + high) / 2;
  const slope = (responseAt(fit, value + 1e-3) - responseAt(fit, value - 1e-3)) / 2e-3;
  const u = responseUncertainty(fit, value);
  return { value, uncertainty: u / Math.max(Math.abs(slope), 0.05) };
}

function responseUncertainty(fit: ProfileFit, f: number): number {
  const gradient = new Float64Array(fit.coefficients.length);
  responseAt(fit, f, gradient);
  return Math.sqrt(quadraticForm(fit.covariance, gradient));
}

/** SFR at a frequency, %. */
export function responsePercent(fit: ProfileFit, f: number): Estimate {
  return { value: 100 * responseAt(fit, f), uncertainty: 100 * responseUncertainty(fit, f) };
}

/** Distance over which the edge rises from 10 % to 90 % of its step, px. */
export function riseDistance(fit: ProfileFit): Estimate {
  const from = level(fit, 0.1);
  const to = level(fit, 0.9);
  const uncertainty = Math.hypot(from.uncertainty, to.uncertainty);
  return { value: to.value - from.value, uncertainty };
}

/** The crossing of a level that is nearest to the edge. */
function level(fit: ProfileFit, target: number): Estimate {
  const direction = target < 0.5 ? -1 : 1;
  const step = fit.widths[0]! / 4;
  let d = 0;
  while (direction * (spreadAt(fit, d) - target) < 0 && Math.abs(d) < 40) d += direction * step;
  let near = d - direction * step;
  let far = d;
  for (let i = 0; i < 30; i++) {
    const middle = (near + far) / 2;
    if (direction * (spreadAt(fit, middle) - target) < 0) near = middle;
    else far = middle;
  }
  const slope = (spreadAt(fit, d + 0.01) - spreadAt(fit, d - 0.01)) / 0.02;
  return {
    value: (near + far) / 2,
    uncertainty: spreadUncertainty(fit, d) / Math.max(slope, 0.01),
  };
}

function spreadUncertainty(fit: ProfileFit, d: number): number {
  const gradient = new Float64Array(fit.coefficients.length);
  spreadAt(fit, d, gradient);
  return Math.sqrt(quadraticForm(fit.covariance, gradient));
}

/** Mean of how far the profile passes its two plateaus, % of the step; 0 for an edge that was never sharpened. */
export function overshootPercent(fit: ProfileFit): Estimate {
  const step = fit.widths[0]! / 4;
  const end = fit.widths[fit.widths.length - 1]! * 3;
  let over = 0;
  let overAt = 0;
  let under = 0;
  let underAt = 0;
  for (let d = step; d < end; d += step) {
    const above = spreadAt(fit, d) - 1;
    const below = -spreadAt(fit, -d);
    if (above > over) {
      over = above;
      overAt = d;
    }
    if (below > under) {
      under = below;
      underAt = -d;
    }
  }
  const u = (at: number) => spreadUncertainty(fit, at === 0 ? 3 * fit.widths[2]! : at);
  return { value: 50 * (over + under), uncertainty: 50 * Math.hypot(u(overAt), u(underAt)) };
}
