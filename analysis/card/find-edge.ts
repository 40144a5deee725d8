import type { PlacedEdge } from '../edge/place-edges.ts';
import type { Frame } from '../image.ts';

/** A part of the picture, image pixels; fractions are cut off inwards. */
export interface Rectangle {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

const passes = 4;
/** Lines of pixels in which the edge must be seen. Our choice. */
const fewestLines = 20;
/** Steeper than this the edge isn't nearly upright or level, db/da. */
const steepest = 0.7;

/** Finds the one edge in a rectangle, as a straight line through the centroids of its lines' differences (ISO 12233, step 3); null without one. */
export function findEdge(frame: Frame, rectangle: Rectangle): PlacedEdge | null {
  const bounds = clamp(frame, rectangle);
  const vertical = differences(frame, bounds, true) > differences(frame, bounds, false);
  const lines = readLines(frame, bounds, vertical);
  if (lines.length < fewestLines) return null;
  const first = vertical ? bounds.left : bounds.top;
  const start = vertical ? bounds.top : bounds.left;
  let line: Line = { at: (lines[0]!.length - 1) / 2, slope: 0 };
  let reach = lines[0]!.length / 2;
  for (let pass = 0; pass < passes; pass++) {
    const next = fitCentroids(lines, line, reach);
    if (!next) return null;
    line = next;
    reach = Math.max(8, reach / 2);
  }
  if (Math.abs(line.slope) > steepest) return null;
  const a = start + lines.length / 2;
  const b = first + line.at + 0.5;
  return {
    station: 'edge',
    edge: vertical ? 'vertical' : 'horizontal',
    middle: vertical ? { x: b, y: a } : { x: a, y: b },
    length: lines.length * Math.hypot(1, line.slope),
    slope: line.slope,
    sagitta: 0,
    outward: rise(lines, line) > 0 ? 1 : -1,
  };
}

function clamp(frame: Frame, { left, top, right, bottom }: Rectangle): Rectangle {
  return {
    left: Math.max(0, Math.ceil(left)),
    top: Math.max(0, Math.ceil(top)),
    right: Math.min(frame.width, Math.floor(right)),
    bottom: Math.min(frame.height, Math.floor(bottom)),
  };
}

function green(frame: Frame, col: number, row: number): number {
  return frame.toLinear[1][frame.data[(row * frame.width + col) * 3 + 1]!]!;
}

/** Sum of squared differences between neighbours along one axis. */
function differences(
  frame: Frame,
  { left, top, right, bottom }: Rectangle,
  alongX: boolean,
): number {
  let sum = 0;
  for (let row = top; row < bottom - 1; row++)
    for (let col = left; col < right - 1; col++) {
      const next = alongX ? green(frame, col + 1, row) : green(frame, col, row + 1);
      sum += (next - green(frame, col, row)) ** 2;
    }
  return sum;
}

/** Linear green across the edge, one array for each line along it. */
function readLines(frame: Frame, bounds: Rectangle, vertical: boolean): Float64Array[] {
  const { left, top, right, bottom } = bounds;
  const [count, length] = vertical ? [bottom - top, right - left] : [right - left, bottom - top];
  if (!(count > 0 && length > 4)) return [];
  return Array.from({ length: count }, (_, i) =>
    Float64Array.from({ length }, (__, k) =>
      vertical ? green(frame, left + k, top + i) : green(frame, left + i, top + k),
    ),
  );
}

/** Position across (pixel number, centres whole) at the middle line, and its change from line to line. */
interface Line {
  readonly at: number;
  readonly slope: number;
}

function fitCentroids(lines: readonly Float64Array[], line: Line, reach: number): Line | null {
  const middle = (lines.length - 1) / 2;
  let [n, st, stt, sp, stp] = [0, 0, 0, 0, 0];
  lines.forEach((values, i) => {
    const t = i - middle;
    const centre = centroid(values, line.at + line.slope * t, reach);
    if (centre === null) return;
    n++;
    st += t;
    stt += t * t;
    sp += centre;
    stp += t * centre;
  });
  const determinant = n * stt - st * st;
  if (n < fewestLines || !(determinant > 0)) return null;
  const slope = (n * stp - st * sp) / determinant;
  return { at: (sp - slope * st) / n, slope };
}

function centroid(values: Float64Array, near: number, reach: number): number | null {
  let weight = 0;
  let moment = 0;
  for (let k = 1; k < values.length - 1; k++) {
    const off = Math.abs(k - near) / reach;
    if (off > 1) continue;
    const difference = (values[k + 1]! - values[k - 1]!) * (0.54 + 0.46 * Math.cos(Math.PI * off));
    weight += difference;
    moment += difference * k;
  }
  const at = moment / weight;
  return Number.isFinite(at) && at >= 0 && at < values.length ? at : null;
}

/** Light beyond the edge less light before it. */
function rise(lines: readonly Float64Array[], line: Line): number {
  const middle = (lines.length - 1) / 2;
  return lines.reduce((sum, values, i) => {
    const at = line.at + line.slope * (i - middle);
    const light = (k: number) => values[Math.min(values.length - 1, Math.max(0, Math.round(k)))]!;
    return sum + light(at + 6) - light(at - 6);
  }, 0);
}
