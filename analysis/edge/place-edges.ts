import type { Point } from '../image.ts';
import type { Edge } from '../result.ts';
import type { Registration } from '../target/registration.ts';

/** Where one edge of a station's square should lie, before the edge itself is looked at. */
export interface PlacedEdge {
  readonly station: string;
  /** Direction of the edge in the picture as shown: 'vertical' when it runs nearer to upright. */
  readonly edge: Edge;
  readonly middle: Point;
  /** Distance of its two corners, px. */
  readonly length: number;
  /** db/da of the line through the corners: a runs along the edge (rows of a vertical edge), b across. */
  readonly slope: number;
  /** How far lens distortion lifts the edge's middle off that line, along b, px. */
  readonly sagitta: number;
  /** +1 when the outside of the square, the light side, lies toward growing b. */
  readonly outward: 1 | -1;
}

/** The four edges of every station that is wholly in the frame. */
export function placeEdges(registration: Registration): PlacedEdge[] {
  const placed: PlacedEdge[] = [];
  for (const station of registration.target.stations) {
    const corners = registration.corners.get(station.id);
    if (corners?.length !== 4) continue;
    const nominal = nominalCorners(registration, station);
    const centre = registration.toImage(station.x, station.y);
    for (let i = 0; i < 4; i++) {
      const next = (i + 1) % 4;
      const sag = sagittaOf(registration, nominal[i]!, nominal[next]!);
      placed.push(placeEdge(station.id, corners[i]!, corners[next]!, centre, sag));
    }
  }
  return placed;
}

function nominalCorners(registration: Registration, at: Point): Point[] {
  const { squareSide, rotationDegrees } = registration.target.station;
  const angle = (rotationDegrees * Math.PI) / 180;
  const c = (Math.cos(angle) * squareSide) / 2;
  const s = (Math.sin(angle) * squareSide) / 2;
  return [
    { x: at.x - c + s, y: at.y - s - c },
    { x: at.x + c + s, y: at.y + s - c },
    { x: at.x + c - s, y: at.y + s + c },
    { x: at.x - c - s, y: at.y - s + c },
  ];
}

/** Offset of the model's edge from its chord at the middle, px. */
function sagittaOf(registration: Registration, from: Point, to: Point): Point {
  const a = registration.toImage(from.x, from.y);
  const b = registration.toImage(to.x, to.y);
  const middle = registration.toImage((from.x + to.x) / 2, (from.y + to.y) / 2);
  return { x: middle.x - (a.x + b.x) / 2, y: middle.y - (a.y + b.y) / 2 };
}

function placeEdge(station: string, from: Point, to: Point, centre: Point, sag: Point): PlacedEdge {
  const dx = to.x - from.x;
  const dy = to.y - from.y;
  const vertical = Math.abs(dy) > Math.abs(dx);
  const middle = { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 };
  const slope = vertical ? dx / dy : dy / dx;
  // Only the part across the edge bends it; the part along it is perspective.
  const sagitta = vertical ? sag.x - slope * sag.y : sag.y - slope * sag.x;
  const across = vertical
    ? middle.x - centre.x - slope * (middle.y - centre.y)
    : middle.y - centre.y - slope * (middle.x - centre.x);
  return {
    station,
    edge: vertical ? 'vertical' : 'horizontal',
    middle,
    length: Math.hypot(dx, dy),
    slope,
    sagitta,
    outward: across > 0 ? 1 : -1,
  };
}
