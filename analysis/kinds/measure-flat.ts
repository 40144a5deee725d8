import { MeasurementError } from '../errors.ts';
import { contrastSpread, type LightScale } from '../exposure/lent-tone.ts';
import { readBlocks } from '../field/block-means.ts';
import { evennessOf, everyBlock } from '../field/evenness.ts';
import { type DustSpot, dustCountUncertainty, findDust } from '../field/find-dust.ts';
import { fitShading, type LightSpot } from '../field/fit-shading.ts';
import { cornerMetrics, gridOf } from '../field/measure-shading.ts';
import type { Frame } from '../image.ts';
import type { Metric, Plots, Warning } from '../result.ts';

const columns = 32;
const rows = 24;
/** Structure, as a share of the light, from which the frame shows something. Our choice. */
export const roughest = 0.03;
/** Doubt of a block's light that its pixels don't show: the diffuser's own unevenness, stops. Our choice, 0.3 %. */
const unevenness = 0.004;

/**
 * An evenly lit surface that fills the frame.
 * - shading.corner, shading.asymmetry, EV: as for the target (following ISO 17957), from a smooth fit to block means over the whole frame
 * - dust.count, 1; dust.largest, px: diameter at half depth of the largest; dust.contrast, %: light missing in the deepest
 * Dust depends on the aperture: f/16 or f/22 shows it. Common practice, no standard.
 * @throws MeasurementError not-flat when the frame shows structure, flat-clipped when much of it is at the end of the scale
 */
export function measureFlat(
  frame: Frame,
  scale: LightScale,
): { metrics: Metric[]; warnings: Warning[]; plots: Pick<Plots, 'shading' | 'spots'> } {
  refuseUneven(frame);
  const shading = measureFlatShading(frame, scale);
  const spots = findDust(frame, scale.codeToLight);
  const metrics = [...shading.metrics, ...dustMetrics(spots)];
  return {
    metrics,
    warnings: [],
    plots: {
      ...(shading.plot ? { shading: shading.plot } : {}),
      spots: spots.map(({ x, y, diameter, depth }) => ({ x, y, diameter, contrast: 100 * depth })),
    },
  };
}

function refuseUneven(frame: Frame): void {
  const blocks = readBlocks(frame, columns, rows);
  const all = everyBlock(blocks);
  const clipped = all.filter((b) => isClipped(blocks.red[b]!, blocks.green[b]!, blocks.blue[b]!));
  if (clipped.length > 0.02 * all.length) {
    throw new MeasurementError(
      'flat-clipped',
      `${Math.round((100 * clipped.length) / all.length)} % of the frame is at an end of the scale, where neither light nor dust shows. Change the exposure until no part is white or black.`,
    );
  }
  const evenness = evennessOf(blocks, all);
  if (!evenness || evenness.roughness > roughest) {
    const seen = evenness ? `differs by ${(100 * evenness.roughness).toFixed(0)} %` : 'is too dark';
    throw new MeasurementError(
      'not-flat',
      `The light ${seen} from place to place beyond a smooth fall to the corners, so this isn’t an even surface. Photograph a plain, evenly lit surface, out of focus.`,
    );
  }
}

function isClipped(...codes: number[]): boolean {
  return codes.some((code) => code > 0.985) || codes.every((code) => code < 0.015);
}

function measureFlatShading(
  frame: Frame,
  scale: LightScale,
): { metrics: Metric[]; plot: Plots['shading'] | null } {
  const spots = readLight(frame, scale);
  const fit = fitShading(spots);
  if (!fit) return { metrics: [], plot: null };
  const metrics = cornerMetrics(fit, frame);
  if (scale.lent) return { metrics, plot: { columns: 16, rows: 12, ev: gridOf(frame, fit) } };
  // Without a tone response stops are off in proportion to the curve's contrast.
  const wider = metrics.map((metric) => ({
    ...metric,
    uncertainty: Math.hypot(metric.uncertainty, contrastSpread * metric.value),
  }));
  return { metrics: wider, plot: { columns: 16, rows: 12, ev: gridOf(frame, fit) } };
}

/** Light of each block of a coarser grid; blocks at the frame's own corners carry the fit out to them. */
function readLight(frame: Frame, scale: LightScale): LightSpot[] {
  const blocks = readBlocks(frame, columns, rows);
  const half = Math.hypot(frame.width, frame.height) / 2;
  const across = Math.floor(frame.width / columns);
  const down = Math.floor(frame.height / rows);
  return everyBlock(blocks).flatMap((block) => {
    const { red, green, blue } = blocks;
    // Green and the mean of red and blue, as the eye's weights have it; the surface has no colour of its own.
    const code = 0.25 * red[block]! + 0.6 * green[block]! + 0.15 * blue[block]!;
    const light = scale.codeToLight(code);
    if (!(light > 0) || isClipped(red[block]!, green[block]!, blue[block]!)) return [];
    const noise = blocks.spread[block]! / blocks.luminance[block]! / Math.sqrt(blocks.count);
    return [
      {
        x: (((block % columns) + 0.5) * across - frame.width / 2) / half,
        y: ((Math.floor(block / columns) + 0.5) * down - frame.height / 2) / half,
        ev: Math.log2(light),
        uncertainty: Math.hypot((2 * noise) / Math.LN2, unevenness),
      },
    ];
  });
}

function dustMetrics(spots: readonly DustSpot[]): Metric[] {
  const count: Metric = {
    name: 'dust.count',
    value: spots.length,
    unit: '1',
    uncertainty: dustCountUncertainty(spots),
  };
  const [first] = spots;
  if (!first) return [count];
  const largest = spots.reduce((a, b) => (b.diameter > a.diameter ? b : a), first);
  const deepest = spots.reduce((a, b) => (b.depth > a.depth ? b : a), first);
  return [
    count,
    {
      name: 'dust.largest',
      value: largest.diameter,
      unit: 'px',
      uncertainty: largest.diameterUncertainty,
    },
    {
      name: 'dust.contrast',
      value: 100 * deepest.depth,
      unit: '%',
      uncertainty: 100 * deepest.depthUncertainty,
    },
  ];
}
