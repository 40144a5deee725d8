import { labToLinearSrgb } from '../colour/cie.ts';
import type { DiscSample } from '../colour/disc-sample.ts';
import { toLinearSrgb } from '../colour/frame-colour.ts';
import type { Triple } from '../colour/matrix.ts';
import { toCode } from '../colour/srgb.ts';
import { MeasurementError } from '../errors.ts';
import { sampleDiscs } from '../exposure/sample-discs.ts';
import { applyHomography, homographyThrough } from '../geometry/homography.ts';
import type { Frame, Point } from '../image.ts';
import type { Disc } from '../target/target.ts';
import type { Card } from './card.ts';

export interface PlacedCard {
  /** In the card's order; patches that are out of the frame or too small are missing. */
  readonly samples: DiscSample[];
  /** Quarter turns, clockwise as seen, by which the card lies in the picture, and whether it is mirrored. */
  readonly turns: 0 | 1 | 2 | 3;
  readonly mirrored: boolean;
}

/** Likeness below which the patches aren't this card's, however it lies, and by which the right way must beat the next. Our choices. */
const leastLike = 0.8;
const clearlyBetter = 0.1;

/**
 * Reads a card's patches. The corners are those of the grid itself, without the card's rim: the outer corners of its four corner
 * patches, clockwise as seen from any of them, or the other way round. Which way the card lies is told by its colours.
 * @throws MeasurementError `card-corners`, `card-not-found`, `card-orientation`
 */
export function placeCard(frame: Frame, card: Card, corners: readonly Point[]): PlacedCard {
  const ways: (PlacedCard & { likeness: number })[] = [];
  for (const mirrored of [false, true])
    for (const turns of [0, 1, 2, 3] as const) {
      const samples = readPatches(frame, card, cornersFor(corners, turns, mirrored));
      if (samples.length > 0)
        ways.push({ samples, turns, mirrored, likeness: likeness(frame, samples) });
    }
  ways.sort((a, b) => b.likeness - a.likeness);
  const [best, next] = ways;
  if (!best) throw cornersWrong();
  if (!(best.likeness > leastLike)) throw notFound();
  if (next && next.likeness > best.likeness - clearlyBetter) throw unclear();
  return { samples: best.samples, turns: best.turns, mirrored: best.mirrored };
}

/** The corners in the order top left, top right, bottom right, bottom left of the card, for one way it may lie. */
function cornersFor(corners: readonly Point[], turns: number, mirrored: boolean): Point[] {
  const around = mirrored ? [corners[1]!, corners[0]!, corners[3]!, corners[2]!] : [...corners];
  return [...around.slice(turns), ...around.slice(0, turns)];
}

/** Trimmed linear means of every patch, over a circle of 0.6 of its half side (about the inner half of it, as for the discs). */
function readPatches(frame: Frame, card: Card, corners: readonly Point[]): DiscSample[] {
  const { rows, columns, gap } = card;
  const [right, bottom] = [columns - gap, rows - gap];
  const grid = [
    { x: 0, y: 0 },
    { x: right, y: 0 },
    { x: right, y: bottom },
    { x: 0, y: bottom },
  ];
  const h = corners.length === 4 ? homographyThrough(grid, corners) : null;
  if (!h) throw cornersWrong();
  const toImage = (x: number, y: number) => applyHomography(h, x, y);
  const step = 1e-3;
  const jacobian = (x: number, y: number) => {
    const [w, e] = [toImage(x - step, y), toImage(x + step, y)];
    const [n, s] = [toImage(x, y - step), toImage(x, y + step)];
    const unit = 1 / (2 * step);
    return [
      (e.x - w.x) * unit,
      (s.x - n.x) * unit,
      (e.y - w.y) * unit,
      (s.y - n.y) * unit,
    ] as const;
  };
  return sampleDiscs(frame, { target: { discs: toDiscs(card) }, toImage, jacobian });
}

/** Patches as the discs that are inscribed in them. */
function toDiscs({ patches, columns, gap }: Card): Disc[] {
  const half = (1 - gap) / 2;
  return patches.map(({ id, lab }, i) => {
    const linearSrgb = labToLinearSrgb(lab);
    const grey = Math.hypot(lab[1], lab[2]) < mostGreyChroma;
    return {
      id,
      kind: grey ? 'grey' : 'colour',
      x: (i % columns) + half,
      y: Math.floor(i / columns) + half,
      radius: half,
      lab,
      linearSrgb,
      srgb8: linearSrgb.map((v) => Math.round(255 * toCode(Math.min(1, Math.max(0, v))))),
      ...(grey ? { reflectance: reflectanceOf(lab) } : {}),
    };
  });
}

/** Greys of the published table have up to 2.9; the palest colours of it 17. Our choice. */
const mostGreyChroma = 5;

/** Y of a lightness (CIE 15). */
function reflectanceOf([l]: Triple): number {
  const f = (l + 16) / 116;
  return f > 6 / 29 ? f ** 3 : 3 * (6 / 29) ** 2 * (f - 4 / 29);
}

/**
 * How like the card's colours these are, −1…1: mean correlation, over the patches, of the logarithms of red, green, blue, and of red
 * and blue over green. Exposure and white balance don't matter to it, nor much does the camera's curve.
 */
function likeness(frame: Frame, samples: readonly DiscSample[]): number {
  const measured = samples.map((s) => logarithms(toLinearSrgb(frame, s.linear)));
  const wanted = samples.map((s) => logarithms(labToLinearSrgb(s.disc.lab as unknown as Triple)));
  const signals = [0, 1, 2, 3, 4].map((i) =>
    correlation(
      measured.map((row) => row[i]!),
      wanted.map((row) => row[i]!),
    ),
  );
  return signals.reduce((sum, r) => sum + r, 0) / signals.length;
}

function logarithms(linear: Triple): number[] {
  // Half a code of 255 through the sRGB curve's foot, below which nothing is told.
  const [r, g, b] = linear.map((v) => Math.log(Math.max(v, 0.002))) as unknown as Triple;
  return [r, g, b, r - g, b - g];
}

function correlation(a: readonly number[], b: readonly number[]): number {
  const mean = (values: readonly number[]) => values.reduce((s, v) => s + v, 0) / values.length;
  const [ma, mb] = [mean(a), mean(b)];
  let [ab, aa, bb] = [0, 0, 0];
  a.forEach((v, i) => {
    ab += (v - ma) * (b[i]! - mb);
    aa += (v - ma) ** 2;
    bb += (b[i]! - mb) ** 2;
  });
  return aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 0;
}

function cornersWrong(): MeasurementError {
  return new MeasurementError(
    'card-corners',
    'The four corners don’t make a grid of patches in the picture. Mark the outer corners of the four corner patches, one after the other round the card.',
  );
}

function notFound(): MeasurementError {
  return new MeasurementError(
    'card-not-found',
    'The colours between the corners aren’t those of this card. Check the corners, which card it is, and that nothing lies on it.',
  );
}

function unclear(): MeasurementError {
  return new MeasurementError(
    'card-orientation',
    'Which way round the card lies can’t be told from its colours. Correct the exposure, or use a card whose colours aren’t alike from several sides.',
  );
}
