import { binsPerPixel } from '../edge/bin-samples.ts';
import { fitProfile, type ProfileFit, responseAt } from '../edge/fit-profile.ts';
import type { EdgeTrace, Traces } from '../edge/trace-edges.ts';
import type { Frame, Point } from '../image.ts';
import type { Edge, Metric, Warning } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import {
  crossing,
  type Estimate,
  overshootPercent,
  responsePercent,
  riseDistance,
} from './read-profile.ts';
import { type StationSharpness, summariseStations } from './summarise-stations.ts';
import { type ChannelShifts, fitUnmixed, hasLuma, spreadOfShifts } from './unmix-luma.ts';

export interface SharpnessResult {
  readonly metrics: Metric[];
  readonly warnings: Warning[];
  /** SFR of each edge direction by station, for StationPlot. */
  readonly curves: ReadonlyMap<string, { edge: Edge; frequency: number[]; response: number[] }[]>;
  /** Geometric mean mtf50 of a station's edges, cy/px. */
  readonly mtf50: ReadonlyMap<string, number>;
}

/** What one direction of edge says at one station. */
export interface EdgeSharpness {
  readonly edge: Edge;
  readonly mtf50: Estimate;
  readonly mtf10: Estimate | null;
  readonly nyquist: Estimate;
  readonly rise: Estimate;
  readonly overshoot: Estimate;
}

/** Relative standard uncertainty that averaging over pixels doesn't lessen: linearisation, edge straightness, JPEG. Found on rendered scenes. */
const systematic = 0.004;
/** The same for the response at high frequencies, where a JPEG rounds much of the little there is to nothing: relative for mtf10, % for nyquist. */
const highFrequency = {
  plain: { mtf10: 0.012, nyquist: 0.6 },
  compressed: { mtf10: 0.03, nyquist: 1.6 },
};
const curvePoints = 33;

/**
 * Sharpness of every station on linearised green, following ISO 12233's edge-based SFR (2014 clause 6.2, curved edges as in 2023).
 * mtf50, mtf10 in cy/px along the edge's normal; nyquist and overshoot in %, rise in px. Groups: `centre`, `partway` (image height
 * 0.3–0.75), `corners` are means of the stations there, a station being the geometric mean of its two directions.
 * Directions that can't be read are left out with a warning. Where the file keeps colour at half the resolution, green is no longer
 * whole: luma is read in its place, and `fringes` (displacement by station, px) says what colour fringes did to it.
 */
export function measureSharpness(
  frame: Frame,
  registration: Registration,
  traces: Traces,
  fringes: { readonly red: ReadonlyMap<string, Point>; readonly blue: ReadonlyMap<string, Point> },
): SharpnessResult {
  const metrics: Metric[] = [];
  const warnings = refusals(traces);
  const curves = new Map<string, { edge: Edge; frequency: number[]; response: number[] }[]>();
  const mtf50 = new Map<string, number>();
  const stations: StationSharpness[] = [];
  for (const { id, x, y } of registration.target.stations) {
    const found: EdgeSharpness[] = [];
    for (const edge of ['vertical', 'horizontal'] as const) {
      const own = traces.edges.filter((e) => e.station === id && e.edge === edge);
      const shifts = shiftsAt(fringes, id);
      const read = readDirection(own, edge, { traces, shifts, frame });
      if (read === null) continue;
      if (typeof read === 'string') {
        warnings.push(unreadable(id, edge, read));
        continue;
      }
      found.push(read.sharpness);
      metrics.push(...edgeMetrics(read.sharpness, id, frame.height));
      curves.set(id, [...(curves.get(id) ?? []), { edge, ...curveOf(read.fit) }]);
    }
    if (found.length === 0) continue;
    const at = registration.toImage(x, y);
    stations.push({ id, height: imageHeight(frame, at.x, at.y), edges: found });
    mtf50.set(id, Math.exp(found.reduce((s, e) => s + Math.log(e.mtf50.value), 0) / found.length));
  }
  metrics.push(...summariseStations(stations, frame.height));
  return { metrics, warnings, curves, mtf50 };
}

function imageHeight(frame: Frame, x: number, y: number): number {
  return (
    (2 * Math.hypot(x - frame.width / 2, y - frame.height / 2)) /
    Math.hypot(frame.width, frame.height)
  );
}

type Unreadable = 'phase' | 'noise';

function shiftsAt(
  fringes: Parameters<typeof measureSharpness>[3],
  station: string,
): ChannelShifts | null {
  const red = fringes.red.get(station);
  const blue = fringes.blue.get(station);
  return red && blue ? { red, blue } : null;
}

interface Surroundings {
  readonly traces: Traces;
  readonly shifts: ChannelShifts | null;
  readonly frame: Frame;
}

/** Both parallel edges together, or why they can't be read; null without an edge. */
export function readDirection(
  edges: readonly EdgeTrace[],
  edge: Edge,
  { traces: { luma }, shifts, frame }: Surroundings,
): { fit: ProfileFit; sharpness: EdgeSharpness } | Unreadable | null {
  if (edges.length === 0) return null;
  if (widestGap(edges) > mostGap) return 'phase';
  const whole = luma && shifts && edges.every(hasLuma) ? { luma, shifts } : null;
  const fit = whole ? fitUnmixed(edges.filter(hasLuma), whole.luma, whole.shifts) : fitGreen(edges);
  if (!fit) return 'noise';
  const read = crossing(fit, 0.5);
  if (!read || read.uncertainty > mostDoubt * read.value) return 'noise';
  const steps = compressionDoubt(frame, fit, read.value);
  const mixing = whole ? unmixingDoubt(edges, whole.shifts, read.value) : 0;
  const mtf50 = widened(read, Math.hypot(steps, mixing));
  return { fit, sharpness: sharpnessOf(fit, edge, mtf50, frame.blockStep !== undefined) };
}

function fitGreen(edges: readonly EdgeTrace[]): ProfileFit | null {
  const sigma = edges.reduce((s, e) => s + e.green.sigma, 0) / edges.length;
  return fitProfile(
    edges.map((e) => e.green.profile),
    sigma,
  );
}

/** Doubt of a displacement told from halved chroma: px, and its share. Found on rendered scenes. */
const shiftDoubt = { floor: 0.015, share: 0.05 };

/** What that doubt does to mtf50: displacements blur by their variance, and a Gaussian's response falls by 0.72 of the change there. */
function unmixingDoubt(edges: readonly EdgeTrace[], shifts: ChannelShifts, mtf50: number): number {
  const spread = Math.sqrt(spreadOfShifts(edges, shifts));
  const doubt = spread * Math.hypot(shiftDoubt.floor, shiftDoubt.share * spread);
  return 0.72 * mtf50 * (2 * Math.PI * mtf50) ** 2 * doubt;
}

/** Share of mtf50 at 0.26 cy/px that a JPEG's rounding to one code takes or adds, and how it grows. Found on rendered scenes. */
const roundingDoubt = { share: 0.036, byStep: 0.7, byFrequency: 1.5 };
/** Noise over the edge's step at which it dithers half of that rounding, so that it shows as noise instead. Found likewise. */
const dithering = 0.03;

/** A JPEG rounds to the same steps all along an edge; the finer the detail, the coarser the steps. */
function compressionDoubt({ blockStep }: Frame, { noise }: ProfileFit, mtf50: number): number {
  if (!blockStep) return 0;
  const { share, byStep, byFrequency } = roundingDoubt;
  const left = 1 / (1 + (noise / dithering) ** 2);
  return mtf50 * share * left * blockStep.luma ** byStep * (mtf50 / 0.26) ** byFrequency;
}

/** Doubt above which a sharpness is not worth showing. Our choice. */
const mostDoubt = 0.25;
/**
 * Widest gap allowed between the pixels' distances from the edge, px. An edge along the pixel grid leaves gaps of 1 px, one at 45°
 * of 0.71 px; both alias. Our choice.
 */
const mostGap = 0.6;

/** Widest stretch across the transition that no pixel of either edge falls in, px. */
function widestGap(edges: readonly EdgeTrace[]): number {
  const distances: number[] = [];
  for (const { green } of edges)
    for (const d of green.profile.distance) if (Math.abs(d) < 1.5) distances.push(d);
  distances.sort((a, b) => a - b);
  let widest = 0;
  for (let i = 1; i < distances.length; i++)
    widest = Math.max(widest, distances[i]! - distances[i - 1]!);
  return distances.length < 4 ? 1 : widest - 1 / binsPerPixel;
}

function sharpnessOf(
  fit: ProfileFit,
  edge: Edge,
  mtf50: Estimate,
  compressed: boolean,
): EdgeSharpness {
  const doubt = compressed ? highFrequency.compressed : highFrequency.plain;
  const mtf10 = crossing(fit, 0.1);
  const rise = riseDistance(fit);
  return {
    edge,
    mtf50: widened(mtf50, systematic * mtf50.value),
    mtf10: mtf10 && widened(mtf10, doubt.mtf10 * mtf10.value),
    nyquist: widened(responsePercent(fit, 0.5), doubt.nyquist),
    rise: widened(rise, 2 * systematic * rise.value),
    overshoot: widened(overshootPercent(fit), 0.2),
  };
}

function widened(estimate: Estimate, by: number): Estimate {
  return { value: estimate.value, uncertainty: Math.hypot(estimate.uncertainty, by) };
}

/** Without a zone, the metrics have none. */
export function edgeMetrics(
  s: EdgeSharpness,
  zone: string | undefined,
  frameHeight: number,
): Metric[] {
  const { edge } = s;
  const lwph = 2 * s.mtf50.value * frameHeight;
  const place = zone === undefined ? { edge } : { zone, edge };
  const metrics: Metric[] = [
    { name: 'sharpness.mtf50', ...place, ...s.mtf50, unit: 'cy/px', lwph },
    { name: 'sharpness.nyquist', ...place, ...s.nyquist, unit: '%' },
    { name: 'sharpness.rise', ...place, ...s.rise, unit: 'px' },
    { name: 'sharpness.overshoot', ...place, ...s.overshoot, unit: '%' },
  ];
  if (s.mtf10) metrics.push({ name: 'sharpness.mtf10', ...place, ...s.mtf10, unit: 'cy/px' });
  return metrics;
}

/** The SFR from 0 to 0.5 cy/px. */
export function curveOf(fit: ProfileFit): { frequency: number[]; response: number[] } {
  const frequency = Array.from({ length: curvePoints }, (_, i) => (0.5 * i) / (curvePoints - 1));
  return { frequency, response: frequency.map((f) => (f === 0 ? 1 : responseAt(fit, f))) };
}

function refusals(traces: Traces): Warning[] {
  const text = {
    clipped:
      'is clipped. Expose so that the pad stays below full scale and the square above black.',
    faint: 'does not stand out of the noise. Use more light or a lower ISO.',
    small: 'covers too few pixels. Move closer or use more pixels.',
  };
  const seen = new Map<string, Warning>();
  for (const { station, edge, reason } of traces.refused)
    seen.set(`${station} ${edge} ${reason}`, {
      code: `edge-${reason}`,
      zone: station,
      message: `A ${edge} edge of station ${station} ${text[reason]}`,
    });
  return [...seen.values()];
}

function unreadable(zone: string, edge: Edge, reason: Unreadable): Warning {
  return reason === 'phase'
    ? {
        code: 'edge-angle',
        zone,
        message: `The ${edge} edges of station ${zone} run along the pixel grid or at 45° to it, so their sharpness can't be told. Turn the camera by two degrees or so.`,
      }
    : {
        code: 'edge-noise',
        zone,
        message: `The ${edge} edges of station ${zone} are too small or too noisy for their sharpness. Move closer, use more light or a lower ISO.`,
      };
}
