import { createSamples, type LightTables } from '../edge/collect-samples.ts';
import { traceEdge } from '../edge/trace-edges.ts';
import { MeasurementError } from '../errors.ts';
import type { Frame } from '../image.ts';
import type { Edge, Metric } from '../result.ts';
import { curveOf, edgeMetrics, readDirection } from '../sharpness/measure-sharpness.ts';
import { findEdge, type Rectangle } from './find-edge.ts';

export interface SlantedEdgeResult {
  readonly edge: Edge;
  /** Angle of the edge to the pixel grid, degrees, 0…45. */
  readonly angle: number;
  readonly metrics: Metric[];
  readonly curve: { readonly frequency: number[]; readonly response: number[] };
}

/** Pixels needed on each side of the edge: the fit reaches as far as the halo of a camera's sharpening. */
const leastMargin = 12;

/**
 * Sharpness of a plain slanted edge marked by a rectangle, on linearised green, following ISO 12233's edge-based SFR: the quantities of
 * sharpness/measure-sharpness.ts without a zone. Light is read through `tables`; without a tone response the file's own curve is used,
 * which for a contrasty camera costs some per cent. Where a file keeps colour at half the resolution, green is a little blurred by it.
 * @param rectangle image pixels, holding one edge from end to end and at least 12 px on both sides of it
 * @throws MeasurementError `edge-not-found`, `edge-clipped`, `edge-faint`, `edge-small`, `edge-angle`, `edge-noise`
 */
export function measureSlantedEdge(
  frame: Frame,
  rectangle: Rectangle,
  tables: LightTables = frame.toLinear,
): SlantedEdgeResult {
  const placed = findEdge(frame, rectangle);
  if (!placed) throw refusal('edge-not-found');
  const { middle, edge, slope } = placed;
  const across =
    edge === 'vertical'
      ? Math.min(middle.x - rectangle.left, rectangle.right - middle.x)
      : Math.min(middle.y - rectangle.top, rectangle.bottom - middle.y);
  const lean = (Math.abs(slope) * placed.length) / 2;
  if (across - lean < leastMargin) throw refusal('edge-small');
  const traced = traceEdge(frame, tables, null, placed, 1, 0, createSamples());
  if (typeof traced === 'string') throw refusal(`edge-${traced}`);
  const read = readDirection([traced], edge, {
    traces: { edges: [traced], luma: null, refused: [] },
    shifts: null,
    frame,
  });
  if (read === null || read === 'noise') throw refusal('edge-noise');
  if (read === 'phase') throw refusal('edge-angle');
  return {
    edge,
    angle: (Math.atan(Math.abs(slope)) * 180) / Math.PI,
    metrics: edgeMetrics(read.sharpness, undefined, frame.height),
    curve: curveOf(read.fit),
  };
}

type Code =
  | 'edge-not-found'
  | 'edge-clipped'
  | 'edge-faint'
  | 'edge-small'
  | 'edge-angle'
  | 'edge-noise';

const reasons: Record<Code, string> = {
  'edge-not-found':
    'No single straight edge lies in the rectangle. Mark one edge between an evenly light and an evenly dark part.',
  'edge-clipped': 'The edge is clipped. Expose so that both sides lie between black and white.',
  'edge-faint': 'The edge does not stand out of the noise. Use more light or a lower ISO.',
  'edge-small':
    'The rectangle holds too few pixels beside the edge. Leave 12 pixels and more on both sides, and 40 along it.',
  'edge-angle':
    'The edge runs along the pixel grid, so its sharpness can’t be told. Turn the camera by five degrees or so.',
  'edge-noise':
    'The edge is too short or too noisy for its sharpness. Move closer, use more light or a lower ISO.',
};

function refusal(code: Code): MeasurementError {
  return new MeasurementError(code, reasons[code]);
}
