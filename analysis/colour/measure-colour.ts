import type { Frame } from '../image.ts';
import type { ColourPlot, Metric, Warning } from '../result.ts';
import { chroma, hue, labToLinearSrgb, linearSrgbToLab } from './cie.ts';
import { bestMatrix } from './correct-colours.ts';
import { deltaE2000 } from './delta-e-2000.ts';
import type { DiscSample } from './disc-sample.ts';
import { toLinearSrgb } from './frame-colour.ts';
import { apply, type Triple } from './matrix.ts';
import { midGrey, toCode } from './srgb.ts';

/** What colour needs of the tone response: how 18 % grey came out, and how light and file are related near it. */
export interface Neutral {
  /** Linear sRGB of an 18 % grey. */
  readonly midGrey: readonly [number, number, number];
  /** Standard uncertainty of each channel, stops. */
  readonly midGreyStops: readonly [number, number, number];
  readonly contrast: number;
}

export interface ColourResult {
  readonly metrics: Metric[];
  readonly warnings: Warning[];
  readonly plots: ColourPlot[];
}

interface Colour {
  readonly id: string;
  readonly kind: ColourPlot['kind'];
  readonly reference: Triple;
  /** Linear sRGB, the light at the disc evened out, not yet scaled. */
  readonly linear: Triple;
  /** Standard uncertainty of each channel of `linear`. */
  readonly uncertainty: Triple;
  readonly clipped: boolean;
}

/** What one disc adds to the statistics. */
interface DiscError {
  chroma: number;
  /** Absolute difference of hue angle, degrees; 0 for discs that aren't of the hue circle. */
  hue: number;
  error: number;
  /** The error left after the best matrix. */
  corrected: number;
}

interface Statistics {
  saturation: number;
  hue: number;
  error: number;
  errorMax: number;
  correctable: number;
}

const fewestColours = 12;

/**
 * Colour of the 24 discs against their printed CIELAB (D50), and of mid grey.
 * Worked out in linear light from the file's own colour space, as the picture is shown: a contrasty rendering counts as one.
 * Each channel is scaled so that mid grey comes out neutral at 18 %; `white.*` are taken with one factor for all channels.
 * - colour.saturation, %: mean C*ab over the references' mean (common practice); within 1 % while unclipped
 * - colour.hue, degrees: mean absolute difference of hue angle of the twelve hue discs (CIE 15)
 * - colour.error, colour.errorMax, ΔE00: mean and largest CIEDE2000 (ISO/CIE 11664-6)
 * - colour.correctable, ΔE00: mean left after the best 3 × 3 matrix in linear light
 * - white.error, white.a, white.b: chroma and a*, b* of mid grey (CIE 15)
 * Clipped discs are left out with a warning; with fewer than twelve the colour quantities are.
 */
export function measureColour(
  frame: Frame,
  samples: readonly DiscSample[],
  neutral: Neutral,
): ColourResult {
  const colours = samples.map((sample) => readColour(frame, sample, neutral.contrast));
  const gains = neutral.midGrey.map((value) => midGrey / value) as unknown as Triple;
  const plots = colours.map((colour) => plot(colour, gains));
  const usable = colours.filter((c) => c.kind !== 'grey' && !c.clipped);
  const metrics = measureWhite(neutral);
  if (usable.length >= fewestColours) metrics.unshift(...measureDiscs(usable, gains, neutral));
  return { metrics, warnings: warn(colours, usable, metrics), plots };
}

function readColour(frame: Frame, sample: DiscSample, contrast: number): Colour {
  // The file's light goes as the light that fell in to the power of the contrast.
  const even = sample.light ** -contrast;
  const relative = sample.linear.map((value) => value * even) as unknown as Triple;
  const spread = sample.uncertainty.map((value) => value * even);
  const m = frame.toSrgb ?? [1, 0, 0, 0, 1, 0, 0, 0, 1];
  const uncertainty = [0, 3, 6].map((row) =>
    Math.hypot(m[row]! * spread[0]!, m[row + 1]! * spread[1]!, m[row + 2]! * spread[2]!),
  );
  return {
    id: sample.disc.id,
    kind: kindOf(sample),
    reference: sample.disc.lab as unknown as Triple,
    linear: toLinearSrgb(frame, relative),
    uncertainty: uncertainty as unknown as Triple,
    clipped: sample.clipped,
  };
}

function kindOf({ disc }: DiscSample): ColourPlot['kind'] {
  if (disc.kind === 'grey') return 'grey';
  if (disc.id.startsWith('hue-')) return 'hue';
  return disc.id.startsWith('vivid-') ? 'vivid' : 'memory';
}

function scale([r, g, b]: Triple, [kr, kg, kb]: Triple): [number, number, number] {
  return [r * kr, g * kg, b * kb];
}

function plot(colour: Colour, gains: Triple): ColourPlot {
  const linear = scale(colour.linear, gains);
  const measured = linearSrgbToLab(linear);
  return {
    id: colour.id,
    kind: colour.kind,
    reference: [...colour.reference],
    measured,
    deltaE2000: deltaE2000(measured, colour.reference),
    measuredRgb: toRgb8(linear),
    referenceRgb: toRgb8(labToLinearSrgb(colour.reference)),
    clipped: colour.clipped,
  };
}

function toRgb8(linear: Triple): [number, number, number] {
  const code = (value: number) => Math.round(255 * toCode(Math.min(1, Math.max(0, value))));
  return [code(linear[0]), code(linear[1]), code(linear[2])];
}

function judge(colour: Colour, linear: Triple, matrix: readonly number[]): DiscError {
  const lab = linearSrgbToLab(linear);
  return {
    chroma: chroma(lab),
    hue: colour.kind === 'hue' ? hueDifference(lab, colour.reference) : 0,
    error: deltaE2000(lab, colour.reference),
    corrected: deltaE2000(linearSrgbToLab(apply(matrix, linear)), colour.reference),
  };
}

function summarise(colours: readonly Colour[], errors: readonly DiscError[]): Statistics {
  const hues = errors.filter((_, i) => colours[i]!.kind === 'hue').map((e) => e.hue);
  return {
    saturation:
      (100 * mean(errors.map((e) => e.chroma))) / mean(colours.map((c) => chroma(c.reference))),
    hue: hues.length > 0 ? mean(hues) : 0,
    error: mean(errors.map((e) => e.error)),
    errorMax: Math.max(...errors.map((e) => e.error)),
    correctable: mean(errors.map((e) => e.corrected)),
  };
}

function hueDifference(one: Triple, other: Triple): number {
  const difference = Math.abs(hue(one) - hue(other));
  return Math.min(difference, 360 - difference);
}

/**
 * The five quantities, with uncertainties by moving each input by its own standard uncertainty (JCGM 100, 5.1.3).
 * The best matrix is held still meanwhile: at its best it changes the mean only in second order.
 */
function measureDiscs(colours: readonly Colour[], gains: Triple, neutral: Neutral): Metric[] {
  const linear = colours.map((c) => scale(c.linear, gains));
  const matrix = bestMatrix(
    linear,
    colours.map((c) => c.reference),
  );
  const errors = colours.map((c, i) => judge(c, linear[i]!, matrix));
  const result = summarise(colours, errors);
  const variance: Statistics = { saturation: 0, hue: 0, error: 0, errorMax: 0, correctable: 0 };
  const add = (moved: readonly DiscError[]) => {
    const other = summarise(colours, moved);
    for (const key of Object.keys(variance) as (keyof Statistics)[]) {
      variance[key] += (other[key] - result[key]) ** 2;
    }
  };
  for (let channel = 0; channel < 3; channel++) {
    const factor = 2 ** neutral.midGreyStops[channel]!;
    const moved = (rgb: Triple, by: number) => withChannel(rgb, channel, rgb[channel]! + by);
    add(
      colours.map((c, i) =>
        judge(c, moved(linear[i]!, linear[i]![channel]! * (factor - 1)), matrix),
      ),
    );
    colours.forEach((c, i) => {
      const step = c.uncertainty[channel]! * gains[channel]!;
      add(errors.with(i, judge(c, moved(linear[i]!, step), matrix)));
    });
  }
  const metric = (key: keyof Statistics, unit: string): Metric => ({
    name: `colour.${key}`,
    value: result[key],
    unit,
    uncertainty: Math.sqrt(variance[key]),
  });
  const hues = colours.filter((c) => c.kind === 'hue').length;
  return [
    metric('saturation', '%'),
    ...(hues >= 6 ? [metric('hue', 'deg')] : []),
    metric('error', 'ΔE00'),
    metric('errorMax', 'ΔE00'),
    metric('correctable', 'ΔE00'),
  ];
}

function withChannel(rgb: Triple, channel: number, value: number): [number, number, number] {
  return rgb.map((old, i) => (i === channel ? value : old)) as [number, number, number];
}

function measureWhite(neutral: Neutral): Metric[] {
  const labOf = (grey: Triple) => {
    const y = 0.2126 * grey[0] + 0.7152 * grey[1] + 0.0722 * grey[2];
    return linearSrgbToLab(scale(grey, [midGrey / y, midGrey / y, midGrey / y]));
  };
  const lab = labOf(neutral.midGrey);
  let varianceA = 0;
  let varianceB = 0;
  let varianceC = 0;
  for (let channel = 0; channel < 3; channel++) {
    const factor = 2 ** neutral.midGreyStops[channel]!;
    const moved = labOf(withChannel(neutral.midGrey, channel, neutral.midGrey[channel]! * factor));
    const [da, db] = [moved[1] - lab[1], moved[2] - lab[2]];
    varianceA += da ** 2;
    varianceB += db ** 2;
    // Near neutral the distance has no direction, so its slope is that of both axes together.
    varianceC += da ** 2 + db ** 2;
  }
  return [
    { name: 'white.error', value: chroma(lab), unit: 'ΔC*ab', uncertainty: Math.sqrt(varianceC) },
    { name: 'white.a', value: lab[1], unit: 'a*', uncertainty: Math.sqrt(varianceA) },
    { name: 'white.b', value: lab[2], unit: 'b*', uncertainty: Math.sqrt(varianceB) },
  ];
}

function warn(colours: readonly Colour[], usable: readonly Colour[], metrics: Metric[]): Warning[] {
  const warnings: Warning[] = [];
  const clipped = colours.filter((c) => c.kind !== 'grey' && c.clipped).map((c) => c.id);
  if (clipped.length > 0) {
    warnings.push({
      code: 'discs-clipped',
      message: `Left out because a channel is clipped: ${clipped.join(', ')}. Lower the exposure, or the saturation in the camera’s menu, and photograph again.`,
    });
  }
  if (usable.length < fewestColours) {
    warnings.push({
      code: 'too-few-colours',
      message:
        'Fewer than twelve colour discs can be used, so colour was not measured. Correct the exposure and show the whole target.',
    });
  }
  const saturation = metrics.find(({ name }) => name === 'colour.saturation');
  if (saturation && saturation.value < 5) {
    warnings.push({
      code: 'no-colour',
      message:
        'The picture is black and white. Set the camera to colour and photograph the target again.',
    });
  }
  return warnings;
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
