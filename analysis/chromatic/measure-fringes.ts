import type { EdgeTrace, Traces } from '../edge/trace-edges.ts';
import type { Frame, Point } from '../image.ts';
import type { Metric } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { displacementBetween, type EdgeDisplacement } from './displacement.ts';
import { type Displaced, type FieldFit, fieldAt, fieldVariance, fitField } from './fit-field.ts';

export interface FringeResult {
  readonly metrics: Metric[];
  /** Displacement against green by station, px, x right and y down, for StationPlot. */
  readonly red: ReadonlyMap<string, Point>;
  readonly blue: ReadonlyMap<string, Point>;
}

interface CompressionDoubt {
  readonly ofValue: number;
  /** px. */
  readonly always: number;
}

/** What averaging over pixels doesn't lessen, px. Found on rendered scenes without compression. */
const floor = 0.004;
/** Share of a displacement that compression swallows or adds: it drops faint colour beside an edge. Found on rendered scenes. */
const swallowed = { full: 0.012, halved: 0.035 };
/** What compression leaves in a displacement of any size and shares out among stations alike, px. Found on rendered scenes. */
const shared = { full: 0.016, halved: 0.055 };
/** Scatter of the stations, px, at which compression is taken to swallow that share; without compression there is none. */
const fullScatter = 0.015;
/** Step of a block's mean colour, codes, at which it does the same. */
const fullStep = 0.25;
/** How far a lens's displacement may depart from a smooth field at one station, px. Our choice. */
const roughness = 0.04;
/** Fewest stations that a smooth field is drawn through. */
const fewestStations = 6;

/**
 * Displacement of the red and the blue image against the green (following ISO 19084), px.
 * Per station from its square's four edges: `value` outward along the radius from the frame's centre, `tangential` across it,
 * clockwise as seen; zone `corners` is the value of the corner station where it is largest. `redScale` and `blueScale` (‰) and
 * `fringe.shift` (px) come from one weighted fit over all stations, displacement = shift + scale · position about the frame's centre.
 * Where compression has scattered the stations, each is drawn toward a smooth field through all of them as far as its doubt allows.
 * It is the displacement in the picture: a camera that raises saturation raises it alike.
 */
export function measureFringes(
  frame: Frame,
  registration: Registration,
  traces: Traces,
  chromaHalved: boolean,
): FringeResult {
  const share = chromaHalved
    ? { ofValue: swallowed.halved, always: shared.halved }
    : { ofValue: swallowed.full, always: shared.full };
  const rawRed = displacements(registration, traces, 'red', chromaHalved);
  const rawBlue = displacements(registration, traces, 'blue', chromaHalved);
  const red = settle(frame, rawRed, share);
  const blue = settle(frame, rawBlue, share);
  const metrics = [...stationMetrics(frame, red, 'red'), ...stationMetrics(frame, blue, 'blue')];
  metrics.push(...fieldMetrics(frame, rawRed, rawBlue, share));
  return { metrics, red: vectors(red), blue: vectors(blue) };
}

function vectors(displaced: readonly Displaced[]): Map<string, Point> {
  return new Map(displaced.map((d) => [d.station, { x: d.x, y: d.y }]));
}

function displacements(
  registration: Registration,
  traces: Traces,
  colour: 'red' | 'blue',
  chromaHalved: boolean,
): Displaced[] {
  const displaced: Displaced[] = [];
  for (const { id, x, y } of registration.target.stations) {
    const edges = traces.edges.filter((e) => e.station === id);
    const found: { edge: EdgeTrace; by: EdgeDisplacement }[] = [];
    for (const edge of edges) {
      const by = displacementBetween(edge, colour, chromaHalved);
      if (by) found.push({ edge, by });
    }
    const vector = combineEdges(found);
    if (vector) displaced.push({ station: id, at: registration.toImage(x, y), ...vector });
  }
  return displaced;
}

/** Least squares of normal · vector = displacement over the edges; null unless both directions are there. */
function combineEdges(
  found: readonly { edge: EdgeTrace; by: EdgeDisplacement }[],
): Pick<Displaced, 'x' | 'y' | 'covariance'> | null {
  const directions = new Set(found.map(({ edge }) => edge.edge));
  if (directions.size < 2) return null;
  let xx = 0;
  let xy = 0;
  let yy = 0;
  let bx = 0;
  let by = 0;
  for (const { edge, by: shift } of found) {
    const weight = 1 / shift.uncertainty ** 2;
    const { x, y } = edge.normal;
    xx += weight * x * x;
    xy += weight * x * y;
    yy += weight * y * y;
    bx += weight * x * shift.value;
    by += weight * y * shift.value;
  }
  const determinant = xx * yy - xy * xy;
  return {
    x: (yy * bx - xy * by) / determinant,
    y: (xx * by - xy * bx) / determinant,
    covariance: [yy / determinant + floor ** 2, -xy / determinant, xx / determinant + floor ** 2],
  };
}

/** Adds the scatter that compression causes to each station's doubt, and draws the station toward the smooth field by it. */
function settle(
  frame: Frame,
  displaced: readonly Displaced[],
  share: CompressionDoubt,
): Displaced[] {
  const fit =
    displaced.length < fewestStations
      ? null
      : fitField(displaced, middleOf(frame), reachOf(frame), true);
  return displaced.map((d) => {
    if (!fit) {
      const [xx, xy, yy] = d.covariance;
      const by = (value: number) => compressionDoubt(share, 1, value) ** 2;
      return { ...d, covariance: [xx + by(d.x), xy, yy + by(d.y)] };
    }
    const compressed = compression(frame, fit);
    const by = (value: number) => compressionDoubt(share, compressed, value) ** 2;
    const field = fieldAt(fit, d.at);
    const prior = roughness ** 2 + fieldVariance(fit, d.at);
    const vx = d.covariance[0] + fit.extraVariance;
    const vy = d.covariance[2] + fit.extraVariance;
    const x = field.x + ((d.x - field.x) * prior) / (prior + vx);
    const y = field.y + ((d.y - field.y) * prior) / (prior + vy);
    const xx = (vx * prior) / (prior + vx) + by(x);
    const yy = (vy * prior) / (prior + vy) + by(y);
    return { ...d, x, y, covariance: [xx, d.covariance[1], yy] };
  });
}

/** px. */
function compressionDoubt(share: CompressionDoubt, compressed: number, value: number): number {
  return compressed * Math.hypot(share.always, share.ofValue * value);
}

/** 0 … 1: how coarsely the file rounds its colour, or how far the stations' scatter speaks of compression before this file. */
function compression(frame: Frame, fit: FieldFit): number {
  const stated = (frame.blockStep?.chroma ?? 0) / fullStep;
  return Math.min(1, Math.max(stated, Math.sqrt(fit.extraVariance) / fullScatter));
}

function middleOf(frame: Frame): Point {
  return { x: frame.width / 2, y: frame.height / 2 };
}

function reachOf(frame: Frame): number {
  return Math.hypot(frame.width, frame.height) / 2;
}

function stationMetrics(
  frame: Frame,
  displaced: readonly Displaced[],
  colour: 'red' | 'blue',
): Metric[] {
  const metrics = displaced.map((d) => alongRadius(frame, d, colour));
  const corners = metrics.filter((m) => ['NW', 'NE', 'SW', 'SE'].includes(m.zone!));
  const worst = corners.toSorted((a, b) => Math.abs(b.value) - Math.abs(a.value))[0];
  if (!worst) return metrics;
  const { value, uncertainty } = worst;
  const name = `fringe.${colour}`;
  return [...metrics, { name, zone: 'corners', value, unit: 'px', uncertainty }];
}

function alongRadius(frame: Frame, d: Displaced, colour: 'red' | 'blue'): Metric {
  const dx = d.at.x - frame.width / 2;
  const dy = d.at.y - frame.height / 2;
  const radius = Math.hypot(dx, dy);
  // Within a pixel of the frame's centre there is no outward; x stands in for it.
  const [rx, ry] = radius > 1 ? [dx / radius, dy / radius] : [1, 0];
  const [xx, xy, yy] = d.covariance;
  return {
    name: `fringe.${colour}`,
    zone: d.station,
    value: d.x * rx + d.y * ry,
    unit: 'px',
    uncertainty: Math.sqrt(rx * rx * xx + 2 * rx * ry * xy + ry * ry * yy),
    tangential: d.y * rx - d.x * ry,
  };
}

/** Doubt of a magnification that no number of stations lessens, ‰. */
const scaleFloor = 0.004;

function fieldMetrics(
  frame: Frame,
  red: readonly Displaced[],
  blue: readonly Displaced[],
  share: CompressionDoubt,
): Metric[] {
  const metrics: Metric[] = [];
  const shifts: { value: number; uncertainty: number }[] = [];
  for (const [name, displaced] of [
    ['fringe.redScale', red],
    ['fringe.blueScale', blue],
  ] as const) {
    const fit = fitField(displaced, middleOf(frame), reachOf(frame), false);
    if (!fit) continue;
    const { coefficients, covariance } = fit;
    const compressed = compression(frame, fit);
    const reach = reachOf(frame);
    const value = 1000 * coefficients[2]!;
    const noise = 1000 * Math.sqrt(covariance[8]!);
    // At the frame's corners the magnification's doubt is that of a displacement.
    const doubtAt = compressionDoubt(share, compressed, coefficients[2]! * reach);
    const uncertainty = Math.hypot(noise, scaleFloor, (1000 * doubtAt) / reach);
    metrics.push({ name, value, unit: '‰', uncertainty });
    const shift = Math.hypot(coefficients[0]!, coefficients[1]!);
    const doubt = Math.hypot(
      Math.sqrt(covariance[0]!),
      floor,
      compressionDoubt(share, compressed, shift),
    );
    shifts.push({ value: shift, uncertainty: doubt });
  }
  const largest = shifts.toSorted((a, b) => b.value - a.value)[0];
  if (largest) metrics.push({ name: 'fringe.shift', ...largest, unit: 'px' });
  return metrics;
}
