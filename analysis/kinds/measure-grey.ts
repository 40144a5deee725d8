import { linearSrgbToLab } from '../colour/cie.ts';
import { toLinearSrgb } from '../colour/frame-colour.ts';
import { luminance, midGrey } from '../colour/srgb.ts';
import { MeasurementError } from '../errors.ts';
import type { LightScale } from '../exposure/lent-tone.ts';
import { automatic } from '../exposure/measure-exposure.ts';
import { type BlockMeans, readBlocks } from '../field/block-means.ts';
import { type Evenness, evennessOf, growFromMiddle } from '../field/evenness.ts';
import type { Capture, Frame } from '../image.ts';
import { type PlacedSpot, snrOf } from '../noise/measure-noise.ts';
import { measureSpot } from '../noise/measure-spot.ts';
import type { Metric, Warning } from '../result.ts';

const columns = 40;
const rows = 30;
/** Largest step of light from block to block within a card. Our choice. */
const mostStep = 0.08;
/** Structure as a share of the light, and fall of light over the card in EV, from which it isn't even. Our choice. */
const roughest = 0.03;
const mostRange = 2;
/** Share of the frame that a card must fill. Our choice. */
const leastShare = 0.1;
/** Half side of the frame's middle, as a share of the frame, and how much of it must be card. Our choice. */
const middleHalf = 0.15;
const middleShare = 0.85;
/** What is left of rounding and of the card's own unevenness in a mean over its middle: stops, and codes of 255 a channel. */
const doubtStops = 0.004;
const doubtCode = 0.12;

export interface Card extends Evenness {
  readonly blocks: BlockMeans;
  /** Blocks that lie wholly on the card. */
  readonly inside: readonly number[];
  /** Part of the frame that the card fills, 0…1. */
  readonly share: number;
  /** Part of the frame's middle that the card fills, 0…1. */
  readonly ofMiddle: number;
}

/** The even surface about the frame's middle, whatever it is; null where there is none. */
export function findCard(frame: Frame): Card | null {
  const blocks = readBlocks(frame, columns, rows);
  const inside = growFromMiddle(blocks, mostStep);
  const share = inside.length / (columns * rows);
  const evenness = evennessOf(blocks, inside);
  const ofMiddle = inside.filter(isMiddle).length / (4 * middleHalf ** 2 * columns * rows);
  return evenness && { blocks, inside, share, ofMiddle, ...evenness };
}

function isMiddle(block: number): boolean {
  const x = ((block % columns) + 0.5) / columns - 0.5;
  const y = (Math.floor(block / columns) + 0.5) / rows - 0.5;
  return Math.abs(x) < middleHalf && Math.abs(y) < middleHalf;
}

/**
 * A grey card of 18 % that fills the frame's middle.
 * - exposure.bias, EV: how far off the card comes out from code 118 (ISO 12232), in stops of light: through the run's tone response when
 *   one is lent, else through the sRGB curve, whose contrast is then part of the uncertainty
 * - exposure.meterBias, EV: the bias less the compensation dialled in (ISO 2720); the doubt is what surrounds the card. Automatic only
 * - white.error, white.a, white.b: chroma, a* and b* of the card, scaled in luminance to 18 % (CIE 15)
 * - noise.snr, dB: following ISO 15739, as for the target
 * @throws MeasurementError not-a-card when the middle isn't even, card-clipped when it is at an end of the scale
 */
export function measureGrey(
  frame: Frame,
  capture: Capture,
  scale: LightScale,
): { metrics: Metric[]; warnings: Warning[] } {
  const card = findCard(frame);
  refuse(card);
  const middle = middleOf(card);
  const linear = [middle.red, middle.green, middle.blue].map((code, channel) =>
    readTable(frame.toLinear[channel]!, code * frame.maxCode),
  ) as [number, number, number];
  const metrics: Metric[] = [];
  const stops = scale.stopsOverMidTone(middle.luminance);
  if (stops) {
    const uncertainty = Math.hypot(stops.uncertainty, doubtStops);
    metrics.push({ name: 'exposure.bias', value: stops.value, unit: 'EV', uncertainty });
    const meter = meterBias(card, capture, stops.value, uncertainty);
    if (meter) metrics.push(meter);
  }
  metrics.push(...measureWhite(frame, linear));
  const snr = measureCardNoise(frame, card);
  if (snr) metrics.push(snr);
  return { metrics, warnings: stops ? [] : [beyondLent] };
}

const beyondLent: Warning = {
  code: 'exposure-out-of-reach',
  message:
    'The card came out so far from the target shot’s greys that the exposure can’t be told in stops. Correct it by two stops or so and photograph again.',
};

function refuse(card: Card | null): asserts card is Card {
  const again = 'Fill the middle of the frame with an evenly lit grey card and photograph again.';
  if (!card || card.share < leastShare) {
    const seen = card ? `${Math.round(100 * card.share)} %` : 'less than a twentieth';
    throw new MeasurementError(
      'not-a-card',
      `The even surface about the frame’s middle fills ${seen} of it, so this isn’t a grey card. ${again}`,
    );
  }
  if (card.ofMiddle < middleShare) {
    throw new MeasurementError(
      'not-a-card',
      `An even surface fills only ${Math.round(100 * card.ofMiddle)} % of the frame’s middle; something else is seen there. ${again}`,
    );
  }
  if (card.roughness > roughest || card.range > mostRange) {
    const seen =
      card.range > mostRange
        ? `falls by ${card.range.toFixed(1)} EV across it`
        : `differs by ${(100 * card.roughness).toFixed(0)} % from place to place`;
    throw new MeasurementError('not-a-card', `The light of the frame’s middle ${seen}. ${again}`);
  }
  const { red, green, blue } = middleOf(card);
  if (Math.max(red, green, blue) > 0.985 || Math.min(red, green, blue) < 0.015) {
    throw new MeasurementError(
      'card-clipped',
      `The card comes out at ${Math.round(255 * Math.max(red, green, blue))} of 255 in one colour or more, at an end of the scale. Correct the exposure and photograph again.`,
    );
  }
}

/** Means of the card's blocks nearest the frame's middle, the luminance carried on to its centre by the light's smooth fall. */
function middleOf(card: Card): Record<'red' | 'green' | 'blue' | 'luminance', number> {
  const { blocks, inside } = card;
  const near = inside
    .toSorted((a, b) => fromMiddle(blocks, a) - fromMiddle(blocks, b))
    .slice(0, 24);
  const mean = (values: Float64Array) => near.reduce((s, b) => s + values[b]!, 0) / near.length;
  const surface = near.reduce((sum, b) => sum + card.surfaceAt(b), 0) / near.length;
  return {
    red: mean(blocks.red),
    green: mean(blocks.green),
    blue: mean(blocks.blue),
    luminance: (mean(blocks.luminance) * card.atCentre) / surface,
  };
}

function fromMiddle(blocks: BlockMeans, block: number): number {
  const x = (block % blocks.columns) + 0.5 - blocks.columns / 2;
  const y = Math.floor(block / blocks.columns) + 0.5 - blocks.rows / 2;
  return Math.hypot(x / blocks.columns, y / blocks.rows);
}

function meterBias(
  { blocks, inside }: Card,
  capture: Capture,
  bias: number,
  uncertainty: number,
): Metric | null {
  if (capture.program === null || !automatic.has(capture.program)) return null;
  // A meter that averages the whole frame sees the surroundings as well: card and frame bound what it went by.
  const frameMean = blocks.luminance.reduce((s, v) => s + v, 0) / blocks.luminance.length;
  const cardMean = inside.reduce((s, b) => s + blocks.luminance[b]!, 0) / inside.length;
  const doubt = Math.abs(Math.log2(Math.max(frameMean, 1e-4) / cardMean)) / Math.sqrt(12);
  return {
    name: 'exposure.meterBias',
    value: bias - (capture.exposureBias ?? 0),
    unit: 'EV',
    uncertainty: Math.hypot(uncertainty, doubt),
  };
}

function measureWhite(frame: Frame, linear: readonly [number, number, number]): Metric[] {
  const lab = labOf(frame, linear);
  let [varianceA, varianceB, varianceC] = [0, 0, 0];
  const chroma = Math.hypot(lab[1], lab[2]);
  for (let channel = 0; channel < 3; channel++) {
    const relative = ((frame.blockStep?.chroma ?? 0) * 0.29 + doubtCode) / 255;
    // Near mid grey light goes as about the 2.2th power of the code.
    const moved = linear.map((v, c) => (c === channel ? v * (1 + (2.2 * relative) / 0.46) : v));
    const other = labOf(frame, moved as [number, number, number]);
    varianceA += (other[1] - lab[1]) ** 2;
    varianceB += (other[2] - lab[2]) ** 2;
    const along = lab[1] * (other[1] - lab[1]) + lab[2] * (other[2] - lab[2]);
    varianceC += chroma > 0.1 ? (along / chroma) ** 2 : 0;
  }
  // Near neutral the chroma's direction is undecided, and any error adds to it.
  const uncertainty = chroma > 0.1 ? Math.sqrt(varianceC) : Math.sqrt(varianceA + varianceB);
  return [
    { name: 'white.error', value: chroma, unit: 'ΔC*ab', uncertainty },
    { name: 'white.a', value: lab[1], unit: 'a*', uncertainty: Math.sqrt(varianceA) },
    { name: 'white.b', value: lab[2], unit: 'b*', uncertainty: Math.sqrt(varianceB) },
  ];
}

function labOf(frame: Frame, linear: readonly [number, number, number]): [number, number, number] {
  const rgb = toLinearSrgb(frame, linear);
  const scale = midGrey / luminance(...rgb);
  return linearSrgbToLab([rgb[0] * scale, rgb[1] * scale, rgb[2] * scale]);
}

/** Spots of up to 32 px radius on the card's blocks, every other one each way. */
function measureCardNoise(frame: Frame, { blocks, inside }: Card): Metric | null {
  const across = Math.floor(frame.width / columns);
  const down = Math.floor(frame.height / rows);
  const radius = Math.min(32, Math.max(Math.min(across, down) / 2, 6));
  const spots: PlacedSpot[] = [];
  const near = inside.toSorted((a, b) => fromMiddle(blocks, a) - fromMiddle(blocks, b));
  for (const block of near.slice(0, 240)) {
    const [col, row] = [block % columns, Math.floor(block / columns)];
    if (col % 2 === 1 || row % 2 === 1 || spots.length >= 40) continue;
    const at = { x: (col + 0.5) * across, y: (row + 0.5) * down };
    const spot = measureSpot(frame, at, radius);
    if (spot) spots.push({ spot, fromMiddle: fromMiddle(blocks, block) });
  }
  return snrOf(spots);
}

function readTable(table: Float32Array, at: number): number {
  const low = Math.min(table.length - 1, Math.max(0, Math.floor(at)));
  const high = Math.min(table.length - 1, low + 1);
  return table[low]! + (table[high]! - table[low]!) * (at - low);
}
