import { fitNaturalFringes } from '../chromatic/fit-natural-fringes.ts';
import { chroma, linearSrgbToLab } from '../colour/cie.ts';
import { toLinearSrgb } from '../colour/frame-colour.ts';
import { findPalette } from '../colour/palette.ts';
import { toCode } from '../colour/srgb.ts';
import { findNaturalEdges } from '../edge/find-natural-edges.ts';
import { type NaturalEdge, traceNaturalEdge } from '../edge/trace-natural-edge.ts';
import type { Frame } from '../image.ts';
import type { Metric, Plots, Warning } from '../result.ts';

/** Longest side of the picture that colours are told from, and of the still smaller one for the palette, px. */
const colourSide = 256;
const paletteSide = 64;
const paletteColours = 6;
/** Share of the edges that counts as the sharpest. Our choice: few enough to be in focus, enough not to be chance. */
const sharpest = 0.2;
const fewestEdges = 8;

/**
 * A picture of anything: estimates, since no reference is in the frame.
 * - scene.chroma, C*ab: mean chroma (CIE 15) of the picture made small
 * - scene.palette: dominant colours, in `plots.palette`; the command prints them as a metric whose value is a list
 * - scene.rise, px: 10–90 % rise that the sharpest fifth of the natural edges doesn't exceed (common practice)
 * - scene.fringeRed, scene.fringeBlue, ‰: magnification of red and blue against green from natural edges (after ISO 19084)
 */
export function measureScene(frame: Frame): {
  metrics: Metric[];
  warnings: Warning[];
  plots: Pick<Plots, 'palette'>;
} {
  const fine = makeSmall(frame, colourSide);
  const small = makeSmall(frame, paletteSide);
  const rgb = Uint8Array.from(small.linear, (v) => Math.round(255 * toCode(clamp(v))));
  const palette = findPalette(rgb, small.width, small.height, paletteColours);
  const mean = meanChroma(fine);
  const metrics: Metric[] = [
    {
      name: 'scene.chroma',
      value: mean,
      unit: 'C*ab',
      // Averaging over cells takes chroma from fine detail: by how much, two sizes tell.
      uncertainty: Math.hypot((mean - meanChroma(small)) / Math.sqrt(3), 0.1),
    },
  ];
  const edges = findNaturalEdges(frame).flatMap((place): NaturalEdge[] => {
    const edge = traceNaturalEdge(frame, place);
    return edge ? [edge] : [];
  });
  metrics.push(...riseMetric(edges), ...fitNaturalFringes(frame, edges));
  return {
    metrics,
    warnings: metrics.length < 4 ? [estimate, fewEdges] : [estimate],
    plots: { palette },
  };
}

const estimate: Warning = {
  code: 'estimate',
  message:
    'No reference is in the frame, so what is told of colour, sharpness and fringes are estimates. Photograph the target for figures that can be compared.',
};
const fewEdges: Warning = {
  code: 'few-edges',
  message:
    'Too few plain, contrasty edges were found to tell sharpness or fringes from. Photograph something with clear outlines, or the target.',
};

interface Small {
  readonly width: number;
  readonly height: number;
  /** Interleaved linear sRGB. */
  readonly linear: Float32Array;
}

/** Means of linear light over cells, from at most 9 × 9 pixels of each. */
function makeSmall(frame: Frame, longest: number): Small {
  const { data, toLinear } = frame;
  const factor = Math.max(1, Math.ceil(Math.max(frame.width, frame.height) / longest));
  const width = Math.floor(frame.width / factor);
  const height = Math.floor(frame.height / factor);
  const step = Math.max(1, Math.floor(factor / 9));
  const linear = new Float32Array(width * height * 3);
  for (let row = 0; row < height; row++)
    for (let col = 0; col < width; col++) {
      let [r, g, b, n] = [0, 0, 0, 0];
      for (let y = row * factor; y < (row + 1) * factor; y += step)
        for (let x = col * factor; x < (col + 1) * factor; x += step) {
          const at = (y * frame.width + x) * 3;
          r += toLinear[0][data[at]!]!;
          g += toLinear[1][data[at + 1]!]!;
          b += toLinear[2][data[at + 2]!]!;
          n++;
        }
      linear.set(toLinearSrgb(frame, [r / n, g / n, b / n]), (row * width + col) * 3);
    }
  return { width, height, linear };
}

function meanChroma({ width, height, linear }: Small): number {
  let sum = 0;
  for (let i = 0; i < width * height * 3; i += 3)
    sum += chroma(linearSrgbToLab([linear[i]!, linear[i + 1]!, linear[i + 2]!]));
  return sum / (width * height);
}

function riseMetric(edges: readonly NaturalEdge[]): Metric[] {
  const rises = edges.flatMap(({ rise }) => (rise === null ? [] : [rise])).sort((a, b) => a - b);
  if (rises.length < fewestEdges) return [];
  const at = (share: number) => rises[Math.floor(share * (rises.length - 1))]!;
  const value = at(sharpest);
  // A quantile's standard deviation is about √(p (1 − p) / n) in rank; a tenth is what tone and texture leave open.
  const rank = Math.sqrt((sharpest * (1 - sharpest)) / rises.length);
  const scatter = (at(Math.min(1, sharpest + rank)) - at(Math.max(0, sharpest - rank))) / 2;
  return [{ name: 'scene.rise', value, unit: 'px', uncertainty: Math.hypot(scatter, 0.1 * value) }];
}

function clamp(value: number): number {
  return Math.min(1, Math.max(0, value));
}
