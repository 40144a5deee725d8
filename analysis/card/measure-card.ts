import type { DiscSample } from '../colour/disc-sample.ts';
import { toLinearSrgb } from '../colour/frame-colour.ts';
import { measureColour, type Neutral } from '../colour/measure-colour.ts';
import { midGrey } from '../colour/srgb.ts';
import { isGrey } from '../exposure/tone.ts';
import type { Frame, Point } from '../image.ts';
import { plotDiscs } from '../plots.ts';
import type { ColourPlot, Metric, Plots, Warning } from '../result.ts';
import type { Card } from './card.ts';
import { placeCard } from './place-card.ts';

export interface CardResult {
  readonly metrics: Metric[];
  readonly warnings: Warning[];
  readonly plots: { readonly colours: ColourPlot[]; readonly discs: NonNullable<Plots['discs']> };
  /** Trimmed linear means of the patches, in the card's order. */
  readonly samples: readonly DiscSample[];
  /** Quarter turns clockwise, and mirrored or not, by which the card lies in the picture. */
  readonly turns: 0 | 1 | 2 | 3;
  readonly mirrored: boolean;
}

/**
 * Colour of a card's patches against its reference, following what ISO 17321-1 and common practice do with a 24-patch card: the same
 * quantities as for the target's discs (colour/measure-colour.ts), scaled on the card's own greys. Light must be even: a card says
 * nothing of shading. Clipped patches are left out with a warning, and colour as a whole without a grey within 1.2 stops of 18 %.
 * @param corners outer corners of the four corner patches, image pixels, one after the other round the card
 * @throws MeasurementError `card-corners`, `card-not-found`, `card-orientation`
 */
export function measureCard(frame: Frame, card: Card, corners: readonly Point[]): CardResult {
  const { samples, turns, mirrored } = placeCard(frame, card, corners);
  const neutral = findNeutral(frame, samples);
  const discs = plotDiscs(samples);
  if (!neutral) {
    return {
      metrics: [],
      warnings: [noGrey],
      plots: { colours: [], discs },
      samples,
      turns,
      mirrored,
    };
  }
  const { metrics, warnings, plots } = measureColour(frame, samples, neutral);
  const missing = card.patches.length - samples.length;
  if (missing > 0) warnings.push(cutOff(missing));
  return { metrics, warnings, plots: { colours: plots, discs }, samples, turns, mirrored };
}

/** Greys further than this from 18 %, in stops, say nothing of it. Our choice. */
const reach = 1.2;
/** Doubt of a straight line in log–log between greys a stop apart, stops. Our choice. */
const bend = 0.01;

/** 18 % grey between the two greys about it, straight in log–log; by one grey alone when there is none on the other side. */
function findNeutral(frame: Frame, samples: readonly DiscSample[]): Neutral | null {
  const greys = samples
    .filter((s) => isGrey(s) && !s.clipped && s.linear.every((v) => v > 0))
    .map((sample) => ({ sample, x: Math.log2(sample.disc.reflectance! / midGrey) }))
    .filter(({ x }) => Math.abs(x) < reach)
    .sort((a, b) => Math.abs(a.x) - Math.abs(b.x));
  const near = greys[0];
  if (!near) return null;
  const across = greys.find(({ x }) => x * near.x < 0);
  const share = across ? near.x / (near.x - across.x) : 0;
  // What came out over what is printed: cards' greys have a tint of their own, which is no cast.
  const stopsOf = ({ sample }: (typeof greys)[number], c: number) =>
    Math.log2((midGrey * toLinearSrgb(frame, sample.linear)[c]!) / sample.disc.linearSrgb[c]!);
  const channel = (c: number) => {
    const stops = stopsOf(near, c);
    const doubt = near.sample.uncertainty[c]! / near.sample.linear[c]! / Math.LN2;
    if (!across) return { stops, doubt: Math.hypot(doubt, bend * Math.abs(near.x)) };
    const moved = stops + share * (stopsOf(across, c) - stops);
    return { stops: moved, doubt: Math.hypot(doubt, bend * share) };
  };
  const channels = [channel(0), channel(1), channel(2)] as const;
  const [r, g, b] = channels;
  return {
    midGrey: [2 ** r.stops, 2 ** g.stops, 2 ** b.stops],
    midGreyStops: [r.doubt, g.doubt, b.doubt],
    // Only evens out light that differs from disc to disc, which a card can't tell.
    contrast: 1,
  };
}

const noGrey: Warning = {
  code: 'card-no-grey',
  message:
    'No unclipped grey near 18 % is on the card, so its colours can’t be scaled and were not measured. Correct the exposure, or use a card with greys.',
};

function cutOff(missing: number): Warning {
  return {
    code: 'card-cut-off',
    message: `${missing} patches are outside the frame or smaller than four pixels and were not measured. Show the whole card, larger.`,
  };
}
