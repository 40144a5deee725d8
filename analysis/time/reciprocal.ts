import type { GroupResult, Metric, Warning } from '../result.ts';
import { median } from '../statistics/outliers.ts';
import {
  clippedRung,
  leftOut,
  muchClipping,
  overExposed,
  type PlacedShot,
} from './ladder-shots.ts';

/** Nominal exposures this close count as equal, EV. */
const equal = 0.02;
/** Through the sRGB curve a small difference is told to this share: cameras' contrast is within 0.8–1.4. Our choice. */
const contrastDoubt = 0.25;
/** Differences beyond this are no longer small, EV. */
const smallDifference = 0.5;

/**
 * A ladder without greys. Without a tone response no step can be told; but settings that should give equal light (t · k with N · √k)
 * must give equal codes, whatever the curve: the null method. Each of such rungs is compared with the median of its equals, by the
 * frame's median; the rest is named. The picture itself must be the same in all frames.
 */
export function compareReciprocals(
  shots: readonly PlacedShot[],
  earlier: readonly Warning[],
): GroupResult {
  const warnings: Warning[] = [...earlier, noGreys];
  const metrics: Metric[] = [];
  const open = shots.filter((shot) => {
    const clipped = shot.median === null || shot.clippedHighlights > muchClipping;
    if (clipped) warnings.push(clippedRung(shot.name, shot.zone, overExposed));
    return !clipped;
  });
  const waiting = new Set(open);
  for (const first of open) {
    if (!waiting.has(first)) continue;
    const equals = [...waiting].filter((s) => Math.abs(s.nominal - first.nominal) < equal);
    for (const shot of equals) waiting.delete(shot);
    const zones = new Set(equals.map(({ zone }) => zone));
    if (zones.size > 1) metrics.push(...compare(equals, warnings));
    else for (const { name, zone } of equals) warnings.push(leftOut(name, zone, alone));
  }
  return { metrics: withWorst(metrics), warnings };
}

const alone =
  'without the target’s greys only settings that should give equal light can be compared';

const brightness = (shot: PlacedShot) => shot.median?.value ?? 0;

function compare(shots: readonly PlacedShot[], warnings: Warning[]): Metric[] {
  const middle = median(shots.map(brightness));
  const zones = [...new Set(shots.map(({ zone }) => zone))];
  return zones.flatMap((zone) => {
    const mine = shots.filter((shot) => shot.zone === zone);
    const value = mine.reduce((sum, s) => sum + brightness(s) / mine.length, 0) - middle;
    if (Math.abs(value) > smallDifference) {
      const reason = `it differs by about ${Math.abs(value).toFixed(1)} EV, too much to tell without greys`;
      for (const { name } of mine) warnings.push(leftOut(name, zone, reason));
      return [];
    }
    const noise = Math.hypot(...mine.map((s) => s.median?.uncertainty ?? 0)) / mine.length;
    const uncertainty = Math.hypot(noise, contrastDoubt * Math.abs(value), 0.01);
    return [{ name: 'ladder.step', zone, value, unit: 'EV', uncertainty }];
  });
}

function withWorst(steps: Metric[]): Metric[] {
  if (steps.length === 0) return [];
  const worst = steps.reduce((a, b) => (Math.abs(b.value) > Math.abs(a.value) ? b : a));
  const { uncertainty } = worst;
  const value = Math.abs(worst.value);
  return [...steps, { name: 'ladder.worst', value, unit: 'EV', uncertainty }];
}

const noGreys: Warning = {
  code: 'ladder-no-greys',
  message:
    'No target was found, so light can’t be read in stops: only settings that should give equal light are compared, through the sRGB curve. Photograph the ladder of the target.',
};
