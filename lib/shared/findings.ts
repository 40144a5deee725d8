import type { Metric } from '@/analysis/result';
import type { Proposal, RunResult } from './api';
import { decimalsOf, gap, numberText } from './numbers';
import { placeWords } from './places';
import type { RuleOutcome } from './report';

/** A value as the findings read it, whether it comes from one shot or is the mean of a run. */
export interface Reading {
  name: string;
  zone: string | null;
  value: number;
  /** Expanded uncertainty, k = 2 or Student's t. */
  expanded: number;
}

/** A headline that says what was found; `look` when it wants a person's attention. */
export interface Finding {
  title: string;
  detail: string;
  look: boolean;
}

export function readingsOfShot(metrics: readonly Metric[]): Reading[] {
  return metrics.map((m) => ({
    name: m.name,
    zone: m.zone ?? null,
    value: m.value,
    expanded: 2 * m.uncertainty,
  }));
}

export function readingsOfRun(results: readonly RunResult[]): Reading[] {
  return results.map((r) => ({
    name: r.name,
    zone: r.zone,
    value: r.mean,
    expanded: r.expanded,
  }));
}

function find(readings: readonly Reading[], name: string, zone: string | null = null) {
  return readings.find((r) => r.name === name && r.zone === zone) ?? null;
}

function signed(value: number, decimals: number): string {
  const text = numberText(value, decimals);
  return value > 0 && Number(text) !== 0 ? `+${text}` : text;
}

const wholeStops = ['', 'One stop', 'Two stops', 'Three stops'] as const;
const thirdStops = ['', 'A third of a stop', 'Two thirds of a stop'] as const;

/** Stops in words, to the nearest third as cameras are set: 0.68 → "Two thirds of a stop". Empty below a sixth. */
export function stopsInWords(ev: number): string {
  const thirds = Math.round(Math.abs(ev) * 3);
  if (thirds >= 10) return 'More than three stops';
  const whole = wholeStops[Math.floor(thirds / 3)] ?? '';
  const rest = thirds % 3;
  if (whole === '') return thirdStops[rest] ?? '';
  return rest === 0 ? whole : `${whole} and ${rest === 1 ? 'a third' : 'two thirds'}`;
}

export function exposureFinding(readings: readonly Reading[]): Finding | null {
  const bias = find(readings, 'exposure.bias');
  if (!bias) return null;
  const words = stopsInWords(bias.value);
  const places = decimalsOf(bias.expanded, 2);
  const number = `${signed(bias.value, places)} ± ${numberText(bias.expanded, places)}${gap}EV`;
  if (words === '') {
    return { title: 'Exposure is right', detail: `${number} from mid grey.`, look: false };
  }
  const dark = bias.value < 0;
  const compensation = signed(Math.round(-bias.value * 3) / 3, 1);
  return {
    title: `${words} ${dark ? 'dark' : 'bright'}`,
    detail: `${number}. Compensation of ${compensation} would put it right.`,
    look: true,
  };
}

const cornerIds: readonly string[] = ['NW', 'NE', 'SW', 'SE'];

interface Sharpness {
  id: string;
  mtf50: number;
}

/** Geometric mean of the edges measured at each station. */
export function stationSharpness(readings: readonly Reading[]): Sharpness[] {
  const groups = new Map<string, number[]>();
  for (const r of readings) {
    if (r.name !== 'sharpness.mtf50' || r.zone === null || r.value <= 0) continue;
    groups.set(r.zone, [...(groups.get(r.zone) ?? []), r.value]);
  }
  return [...groups].map(([id, values]) => ({
    id,
    mtf50: Math.exp(values.reduce((sum, v) => sum + Math.log(v), 0) / values.length),
  }));
}

const mean = (values: readonly number[]) =>
  values.reduce((sum, v) => sum + v, 0) / Math.max(values.length, 1);
const percent = (share: number) => `${Math.round(share * 100)}${gap}%`;

/** Below these shares of the middle, a corner is worth a headline (common practice, no source). */
const evenCorners = 0.85;
const lonelyCorner = 0.85;

export function sharpnessFinding(readings: readonly Reading[]): Finding | null {
  const stations = stationSharpness(readings);
  const centre = stations.find((s) => s.id === 'C');
  const corners = stations
    .filter((s) => cornerIds.includes(s.id))
    .sort((a, b) => a.mtf50 - b.mtf50);
  const worst = corners[0];
  if (!centre || !worst) return null;
  const loss = 1 - worst.mtf50 / centre.mtf50;
  const where = placeWords[worst.id] ?? worst.id;
  const others = mean(corners.slice(1).map((s) => s.mtf50));
  const otherLoss = 1 - others / centre.mtf50;
  const middle = `The middle resolves ${centre.mtf50.toFixed(3)}${gap}cycles per pixel.`;
  if (otherLoss < -0.1 && corners.length > 1) {
    return {
      title: 'The middle is softer than the corners',
      detail: `${middle} The corners reach ${percent(1 - otherLoss)} of it: check where it focused.`,
      look: true,
    };
  }
  if (1 - loss >= evenCorners) {
    return {
      title: 'Sharp into the corners',
      detail: `The weakest, ${where}, keeps ${percent(1 - loss)} of the middle.`,
      look: false,
    };
  }
  if (corners.length > 1 && worst.mtf50 < lonelyCorner * others) {
    return {
      title: `The ${where} corner is ${percent(loss)} softer`,
      detail: `Measured against the middle; the other corners ${otherLoss < 0.02 ? 'lose nothing' : `lose ${percent(otherLoss)}`}.`,
      look: true,
    };
  }
  const all = 1 - mean(corners.map((s) => s.mtf50)) / centre.mtf50;
  return {
    title: `The corners are ${percent(all)} softer, evenly`,
    detail: `${middle} No single corner stands out.`,
    look: false,
  };
}

/** How fine the edges are that the camera draws. */
export function edgeFinding(readings: readonly Reading[]): Finding | null {
  const stations = stationSharpness(readings);
  const centre = stations.find((s) => s.id === 'C');
  if (!centre) return null;
  const weakest = stations
    .filter((s) => cornerIds.includes(s.id))
    .sort((a, b) => a.mtf50 - b.mtf50)[0];
  const corner = weakest
    ? `; in the weakest corner, ${placeWords[weakest.id] ?? weakest.id}, at ${numberText(weakest.mtf50, 3)}`
    : '';
  return {
    title: `Half the contrast is left at ${numberText(centre.mtf50, 2)}${gap}cycles per pixel`,
    detail: `At ${numberText(centre.mtf50, 3)} in the middle${corner}.`,
    look: false,
  };
}

/** Hue discs turned by more than this on average are seen side by side (common practice, no source). */
const evenHue = 4;

export function colourFinding(readings: readonly Reading[]): Finding | null {
  const saturation = find(readings, 'colour.saturation');
  if (!saturation) return null;
  const hue = find(readings, 'colour.hue');
  const error = find(readings, 'colour.error');
  const detail = error ? `Mean colour error ${error.value.toFixed(1)}${gap}ΔE.` : '';
  const even = !hue || hue.value <= evenHue;
  const off = Math.round(saturation.value - 100);
  if (Math.abs(off) < 4) {
    return even
      ? { title: 'Colours as strong as they should be', detail, look: false }
      : { title: `Hues shifted by ${Math.round(hue.value)}°`, detail, look: true };
  }
  const strength = `${Math.abs(off)}${gap}% ${off > 0 ? 'strong' : 'weak'}`;
  return {
    title: `Colours ${strength}, ${even ? 'evenly' : 'unevenly'}`,
    detail,
    look: Math.abs(off) >= 25 || !even,
  };
}

export function fringeFinding(readings: readonly Reading[]): Finding | null {
  const red = find(readings, 'fringe.red', 'corners');
  const blue = find(readings, 'fringe.blue', 'corners');
  if (!red || !blue) return null;
  const [name, worst] = Math.abs(red.value) >= Math.abs(blue.value) ? ['Red', red] : ['Blue', blue];
  const size = Math.abs(worst.value);
  const number = `${size.toFixed(1)}${gap}px`;
  if (size < 0.5) {
    return {
      title: 'Hardly any colour fringes',
      detail: `At most ${number} in the corners.`,
      look: false,
    };
  }
  return {
    title: `${name} fringes of ${number} in the corners`,
    detail: size < 1 ? 'Seen only in large prints.' : 'Seen at full size along bright edges.',
    look: size >= 2,
  };
}

export function whiteFinding(readings: readonly Reading[]): Finding | null {
  const error = find(readings, 'white.error');
  const a = find(readings, 'white.a');
  const b = find(readings, 'white.b');
  if (!error || !a || !b) return null;
  const number = `${error.value.toFixed(1)}${gap}ΔC*ab from neutral.`;
  if (error.value < 3) return { title: 'Greys are neutral', detail: number, look: false };
  const alongB = Math.abs(b.value) >= Math.abs(a.value);
  const warm = b.value > 0 ? 'yellow' : 'blue';
  const tint = a.value > 0 ? 'magenta' : 'green';
  return {
    title: `Greys lean to ${alongB ? warm : tint}`,
    detail: number,
    look: error.value >= 8,
  };
}

export function gradeFinding(proposal: Proposal | null): Finding {
  if (!proposal) {
    return {
      title: 'No grade yet',
      detail: 'The first measured target shot starts the grade.',
      look: false,
    };
  }
  const parts = proposal.letter === 'Parts';
  const article = proposal.letter === 'A' ? 'an' : 'a';
  return {
    title: parts ? 'So far this is for parts only' : `So far this is ${article} ${proposal.letter}`,
    detail: proposal.sentence,
    look: proposal.letter !== 'A',
  };
}

const smallNumbers = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine'];
const inWords = (n: number) => smallNumbers[n] ?? String(n);

/** What would settle a rule in doubt. */
export function doubtSentence(rule: RuleOutcome): string {
  const { label, moreShots } = rule;
  if (!moreShots) return `${label} is in doubt: the limit lies inside its doubt.`;
  const shots = moreShots === 1 ? 'one more shot' : `${inWords(moreShots)} more shots`;
  return `${label} is in doubt: ${shots} of the target would settle it.`;
}

/** All findings of a run or shot, those that want a look first. */
export function findings(readings: readonly Reading[]): Finding[] {
  return [sharpnessFinding, exposureFinding, colourFinding, fringeFinding, whiteFinding]
    .map((finding) => finding(readings))
    .filter((finding) => finding !== null)
    .sort((a, b) => Number(b.look) - Number(a.look));
}

/** The one line under a shot's thumbnail; null when nothing in it can be told in words. */
export function shotHeadline(metrics: readonly Metric[]): string | null {
  const all = findings(readingsOfShot(metrics));
  const first = all[0];
  if (!first) return null;
  return first.look ? first.title : 'Nothing stands out';
}
