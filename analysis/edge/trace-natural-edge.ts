import type { Frame } from '../image.ts';
import { solveLinear } from '../numeric/linear-solve.ts';
import type { EdgePlace } from './find-natural-edges.ts';

/** One natural edge, traced over a short piece. */
export interface NaturalEdge {
  /** Image pixels. */
  readonly x: number;
  readonly y: number;
  /** Unit normal. */
  readonly nx: number;
  readonly ny: number;
  /** 10–90 % rise of the green profile, px; null when the profile isn't that of a step. */
  readonly rise: number | null;
  /** Displacement of red and blue against green along the normal, px, with standard uncertainty. */
  readonly red: Displaced | null;
  readonly blue: Displaced | null;
}

export interface Displaced {
  readonly value: number;
  readonly uncertainty: number;
}

/** Half length along the edge and half width across it, px. */
const along = 9;
const across = 13;
/** Pixels to each side of the edge that are taken for its transition when it's placed. */
const near = 6;
/** Beyond this distance the profile must be level. */
const plateau = 7;
/** Steps smaller than this, in linear light, drown in noise and in JPEG's rounding. */
const leastStep = 0.025;
/** Scatter of a plateau over the step from which the edge isn't one between two plain surfaces. */
const roughest = 0.12;
const lines = 2 * along + 1;
const pixels = 2 * across + 1;

/** Places the edge line by line, fits a parabola and reads the profile about it; null where there is no such edge. */
export function traceNaturalEdge(frame: Frame, place: EdgePlace): NaturalEdge | null {
  const patch = [0, 1, 2].map((channel) => readPatch(frame, place, channel));
  const green = patch[1]!;
  const step = stepOf(green);
  if (!step || Math.abs(step.size) < leastStep) return null;
  const positions = placeLines(green, Math.sign(step.size), null);
  const curve = positions && fitParabola(positions);
  if (!curve || Math.abs(curve.slope) > 1.1 || curve.scatter > 0.3) return null;
  const cos = 1 / Math.hypot(1, curve.slope);
  const displaced = (channel: 0 | 2): Displaced | null =>
    displacement(patch[channel]!, Math.abs(step.size), positions, cos);
  const [px, py] = [place.col + 0.5, place.row + 0.5];
  const sin = curve.slope * cos;
  return {
    x: place.upright ? px + curve.middle : px,
    y: place.upright ? py : py + curve.middle,
    nx: place.upright ? cos : -sin,
    ny: place.upright ? -sin : cos,
    rise: riseOf(green, curve, cos),
    red: displaced(0),
    blue: displaced(2),
  };
}

/** Linear light, a line across the edge after the other. */
function readPatch(frame: Frame, { col, row, upright }: EdgePlace, channel: number): Float64Array {
  const { data, width } = frame;
  const table = frame.toLinear[channel]!;
  const out = new Float64Array(lines * pixels);
  for (let i = 0; i < lines; i++)
    for (let j = 0; j < pixels; j++) {
      const x = upright ? col + j - across : col + i - along;
      const y = upright ? row + i - along : row + j - across;
      out[i * pixels + j] = table[data[(y * width + x) * 3 + channel]!]!;
    }
  return out;
}

/** Level on the near and the far side, over all lines. */
function stepOf(patch: Float64Array): { low: number; size: number } | null {
  let [first, last] = [0, 0];
  const rim = 4;
  for (let i = 0; i < lines; i++)
    for (let j = 0; j < rim; j++) {
      first += patch[i * pixels + j]!;
      last += patch[i * pixels + pixels - 1 - j]!;
    }
  const n = lines * rim;
  return { low: first / n, size: (last - first) / n };
}

/**
 * Centroid of the derivative in each line, px from the patch's middle column. @param about where to look, from the green; null: follow
 * the edge from the middle line outward
 */
function placeLines(
  patch: Float64Array,
  sign: number,
  about: Float64Array | null,
): Float64Array | null {
  const out = new Float64Array(lines);
  for (let k = 0; k < lines; k++) {
    // Middle line first, then one up, one down: 0, 1, −1, 2, −2 …
    const i = along + (k % 2 === 1 ? (k + 1) / 2 : -k / 2);
    const inner = i === along ? 0 : out[i + (i > along ? -1 : 1)]!;
    const guess = about ? about[i]! : inner;
    const centre = Math.round(guess);
    const [from, to] = [centre - near, centre + near];
    if (from - 1 < -across || to + 1 > across) return null;
    let [sum, moment] = [0, 0];
    // Both signs count: noise then adds nothing, where its rises alone would draw the centroid to the window's middle.
    for (let j = from; j <= to; j++) {
      const at = i * pixels + j + across;
      const rise = sign * (patch[at + 1]! - patch[at - 1]!);
      sum += rise;
      moment += rise * j;
    }
    if (!(sum > leastStep)) return null;
    out[i] = moment / sum;
  }
  return out;
}

interface Parabola {
  readonly middle: number;
  readonly slope: number;
  readonly bend: number;
  /** Root mean square distance of the lines' positions. */
  readonly scatter: number;
}

function fitParabola(positions: Float64Array): Parabola | null {
  const normal = new Float64Array(9);
  const right = new Float64Array(3);
  positions.forEach((p, i) => {
    const t = i - along;
    const basis = [1, t, t * t];
    for (let j = 0; j < 3; j++) {
      right[j]! += basis[j]! * p;
      for (let k = 0; k < 3; k++) normal[j * 3 + k]! += basis[j]! * basis[k]!;
    }
  });
  const solved = solveLinear(normal, right, 3);
  if (!solved) return null;
  const [middle, slope, bend] = [solved[0]!, solved[1]!, solved[2]!];
  let squares = 0;
  positions.forEach((p, i) => {
    const t = i - along;
    squares += (p - middle - slope * t - bend * t * t) ** 2;
  });
  return { middle, slope, bend, scatter: Math.sqrt(squares / (lines - 3)) };
}

function displacement(
  patch: Float64Array,
  greenStep: number,
  green: Float64Array,
  cos: number,
): Displaced | null {
  const step = stepOf(patch);
  if (!step || Math.abs(step.size) < Math.max(leastStep, 0.3 * greenStep)) return null;
  const positions = placeLines(patch, Math.sign(step.size), green);
  if (!positions) return null;
  const differences = positions.map((p, i) => (p - green[i]!) * cos);
  const mean = differences.reduce((s, d) => s + d, 0) / lines;
  const squares = differences.reduce((s, d) => s + (d - mean) ** 2, 0);
  return { value: mean, uncertainty: Math.sqrt(squares / (lines - 1) / lines) };
}

/** Quarter pixels from −across to +across. */
const perPixel = 4;
const bins = 2 * across * perPixel;

function riseOf(patch: Float64Array, curve: Parabola, cos: number): number | null {
  const sum = new Float64Array(bins);
  const count = new Float64Array(bins);
  for (let i = 0; i < lines; i++) {
    const t = i - along;
    const edge = curve.middle + curve.slope * t + curve.bend * t * t;
    for (let j = 0; j < pixels; j++) {
      const bin = Math.floor(((j - across - edge) * cos + across) * perPixel);
      if (bin < 0 || bin >= bins) continue;
      sum[bin]! += patch[i * pixels + j]!;
      count[bin]!++;
    }
  }
  const profile = Array.from(sum, (s, bin) => ({
    distance: (bin + 0.5) / perPixel - across,
    light: count[bin]! > 0 ? s / count[bin]! : Number.NaN,
  })).filter(({ light }) => Number.isFinite(light));
  const low = levelOf(profile.filter(({ distance }) => distance < -plateau));
  const high = levelOf(profile.filter(({ distance }) => distance > plateau));
  if (!low || !high) return null;
  const size = high.mean - low.mean;
  if (Math.max(low.scatter, high.scatter) > roughest * Math.abs(size)) return null;
  const share = profile.map(({ distance, light }) => ({
    distance,
    share: (light - low.mean) / size,
  }));
  const from = crossing(share.filter(({ distance }) => distance < 0.5).reverse(), 0.1);
  const to = crossing(
    share.filter(({ distance }) => distance > -0.5),
    0.9,
  );
  return from === null || to === null || to <= from ? null : to - from;
}

function levelOf(points: readonly { light: number }[]): { mean: number; scatter: number } | null {
  if (points.length < 12) return null;
  const mean = points.reduce((s, { light }) => s + light, 0) / points.length;
  const squares = points.reduce((s, { light }) => s + (light - mean) ** 2, 0);
  return { mean, scatter: Math.sqrt(squares / points.length) };
}

/** Where a profile walked outward from the edge's middle first passes a share of the step. */
function crossing(
  walk: readonly { distance: number; share: number }[],
  wanted: number,
): number | null {
  for (let i = 1; i < walk.length; i++) {
    const [a, b] = [walk[i - 1]!, walk[i]!];
    const passed = (a.share - wanted) * (b.share - wanted) <= 0 && a.share !== b.share;
    if (passed)
      return a.distance + ((b.distance - a.distance) * (wanted - a.share)) / (b.share - a.share);
  }
  return null;
}
