import type { EdgeTrace, Traces } from '../edge/trace-edges.ts';
import type { Frame, Point } from '../image.ts';
import type { Metric } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { displacementBetween, type EdgeDisplacement } from './displacement.ts';
import { type Displaced, fitMagnification } from './fit-magnification.ts';

export interface FringeResult {
  readonly metrics: Metric[];
  /** Displacement against green by station, px, x right and y down, for StationPlot. */
  readonly red: ReadonlyMap<string, Point>;
  readonly blue: ReadonlyMap<string, Point>;
}

/** What averaging doesn't lessen: rounding, the chroma grid of JPEG. px. Found on rendered scenes. */
const floor = 0.004;

/**
 * Displacement of the red and the blue image against the green (following ISO 19084), px.
 * Per station from its square's four edges: `value` outward along the radius from the frame's centre, `tangential` across it,
 * clockwise as seen; zone `corners` is the value of the corner station where it is largest. `redScale` and `blueScale` (‰) and
 * `fringe.shift` (px) come from one weighted fit over all stations, displacement = shift + scale · position about the frame's centre.
 * It is the displacement in the picture: a camera that raises saturation raises it alike.
 */
export function measureFringes(
  frame: Frame,
  registration: Registration,
  traces: Traces,
): FringeResult {
  const red = displacements(registration, traces, 'red');
  const blue = displacements(registration, traces, 'blue');
  const metrics = [...stationMetrics(frame, red, 'red'), ...stationMetrics(frame, blue, 'blue')];
  metrics.push(...fieldMetrics(frame, red, blue));
  return { metrics, red: vectors(red), blue: vectors(blue) };
}

function vectors(displaced: readonly Displaced[]): Map<string, Point> {
  return new Map(displaced.map((d) => [d.station, { x: d.x, y: d.y }]));
}

function displacements(
  registration: Registration,
  traces: Traces,
  colour: 'red' | 'blue',
): Displaced[] {
  const displaced: Displaced[] = [];
  for (const { id, x, y } of registration.target.stations) {
    const edges = traces.edges.filter((e) => e.station === id);
    const found: { edge: EdgeTrace; by: EdgeDisplacement }[] = [];
    for (const edge of edges) {
      const other = edge[colour];
      const by = other && displacementBetween(edge.green, other);
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

function fieldMetrics(
  frame: Frame,
  red: readonly Displaced[],
  blue: readonly Displaced[],
): Metric[] {
  const metrics: Metric[] = [];
  const shifts: { value: number; uncertainty: number }[] = [];
  for (const [name, displaced] of [
    ['fringe.redScale', red],
    ['fringe.blueScale', blue],
  ] as const) {
    const fit = fitMagnification(displaced, { x: frame.width / 2, y: frame.height / 2 });
    if (!fit) continue;
    const { permille, shift } = fit;
    metrics.push({ name, value: permille.value, unit: '‰', uncertainty: permille.uncertainty });
    shifts.push(shift);
  }
  const largest = shifts.toSorted((a, b) => b.value - a.value)[0];
  if (largest) metrics.push({ name: 'fringe.shift', ...largest, unit: 'px' });
  return metrics;
}
