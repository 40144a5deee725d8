import type { DiscSample } from '../colour/disc-sample.ts';
import type { FitPoint } from '../exposure/local-fit.ts';
import { isGrey } from '../exposure/tone.ts';
import type { Warning } from '../result.ts';

/** Stops by which a grey may lie off its neighbours' curve. Our choice. */
const mostAstray = 0.07;
/** How often its own doubt a grey must lie off. */
const standsOut = 4;
/** A curve needs these many, and no more may be left out before the light itself is in doubt. */
const fewestGreys = 6;
const mostLeftOut = 3;

export interface GreyJudgement {
  readonly samples: DiscSample[];
  readonly warnings: Warning[];
  /** So many greys contradict each other that none can be trusted. */
  readonly hopeless: boolean;
}

/**
 * Leaves out greys that lie off the smooth curve through all the others, one after the other, the farthest first: a reflection on a
 * grey would bend the tone response, and with it every quantity in stops.
 */
export function leaveOutAstray(samples: readonly DiscSample[]): GreyJudgement {
  const left: DiscSample[] = [];
  for (;;) {
    const greys = samples.filter((s) => isUsable(s) && !left.includes(s));
    const worst = greys.length < fewestGreys ? null : farthest(greys);
    if (!worst) break;
    left.push(worst);
    if (left.length > mostLeftOut)
      return { samples: [...samples], warnings: [contradict], hopeless: true };
  }
  if (left.length === 0) return { samples: [...samples], warnings: [], hopeless: false };
  const names = left.map(({ disc }) => disc.id).join(', ');
  return {
    samples: samples.filter((s) => !left.includes(s)),
    warnings: [
      {
        code: 'greys-astray',
        message: `Left out because they are lighter or darker than the other greys allow: ${names}. Look for a reflection, a shadow or dirt there, and photograph again.`,
      },
    ],
    hopeless: false,
  };
}

function isUsable(sample: DiscSample): boolean {
  return isGrey(sample) && !sample.clipped && sample.luminance > 0;
}

/**
 * The grey whose absence smooths the curve most. A shoulder bends it too, but leaving one grey out doesn't straighten a shoulder: a
 * lone outlier makes the slope go one way, back and the first way again, and that zigzag is what counts here.
 */
function farthest(greys: readonly DiscSample[]): DiscSample | null {
  const points = greys.map((grey) => ({ grey, ...toPoint(grey) })).sort((a, b) => a.x - b.x);
  const before = zigzag(points);
  let worst: DiscSample | null = null;
  let least = before;
  for (let i = 1; i < points.length - 1; i++) {
    const after = zigzag(points.toSpliced(i, 1));
    const doubt = Math.hypot(points[i - 1]!.sigma, 2 * points[i]!.sigma, points[i + 1]!.sigma);
    const drop = before - after;
    const stands = drop > Math.max(zigzags * mostAstray, zigzags * standsOut * doubt);
    if (!stands || after > mostLeft * before || after >= least) continue;
    least = after;
    worst = points[i]!.grey;
  }
  return worst;
}

/** An outlier by δ changes the second differences by δ, −2δ and δ, whose total variation is some 8 δ, 6 at the ends. */
const zigzags = 6;
/** Share of the zigzag that may remain. Our choice. */
const mostLeft = 0.6;

/** Total variation of the change of slope, in stops over the points' mean spacing. */
function zigzag(points: readonly { x: number; y: number }[]): number {
  const spacing = (points.at(-1)!.x - points[0]!.x) / (points.length - 1);
  const slopes = points.slice(1).map((p, i) => (p.y - points[i]!.y) / (p.x - points[i]!.x));
  const bends = slopes.slice(1).map((slope, i) => (slope - slopes[i]!) * spacing);
  return bends.slice(1).reduce((sum, bend, i) => sum + Math.abs(bend - bends[i]!), 0);
}

/** log2 of what came out against log2 of what is printed. */
function toPoint({ disc, light, luminance, luminanceUncertainty }: DiscSample): FitPoint {
  return {
    x: Math.log2((disc.reflectance ?? 0) * light),
    y: Math.log2(luminance),
    sigma: luminanceUncertainty / luminance / Math.LN2,
  };
}

const contradict: Warning = {
  code: 'greys-contradict',
  message:
    'The greys contradict each other, so exposure, tone and colour were not measured. Look for reflections, shadows and dirt on them, or a camera setting that lightens parts of the picture, and photograph again.',
};
