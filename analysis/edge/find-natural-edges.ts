import type { Frame } from '../image.ts';

/** A place where the green codes change fast, in a picture of anything. */
export interface EdgePlace {
  readonly col: number;
  readonly row: number;
  /** The edge runs more down than across. */
  readonly upright: boolean;
  /** Codes of 255 over four pixels. */
  readonly strength: number;
}

/** Change of code over four pixels from which an edge is worth tracing. Our choice. */
const leastStrength = 20;
/** Edges kept in each zone of the frame, so that one contrasty thing doesn't speak for the whole frame. */
const zones = { columns: 8, rows: 6, most: 14 };
/** Pixels clear of the frame's edge. */
const margin = 20;

/** The strongest place of each small cell and direction, thinned out evenly over the frame; the strongest first within a zone. */
export function findNaturalEdges(frame: Frame): EdgePlace[] {
  const { width, height } = frame;
  const cell = Math.max(16, Math.ceil(Math.max(width, height) / 160));
  const places: EdgePlace[] = [];
  for (let top = margin; top + cell <= height - margin; top += cell)
    for (let left = margin; left + cell <= width - margin; left += cell)
      places.push(...strongestOf(frame, left, top, cell));
  const byZone = new Map<number, EdgePlace[]>();
  for (const place of places) {
    const zone =
      Math.floor((place.row / height) * zones.rows) * zones.columns +
      Math.floor((place.col / width) * zones.columns);
    byZone.set(zone, [...(byZone.get(zone) ?? []), place]);
  }
  return [...byZone.values()].flatMap((list) =>
    list.toSorted((a, b) => b.strength - a.strength).slice(0, zones.most),
  );
}

function strongestOf(frame: Frame, left: number, top: number, cell: number): EdgePlace[] {
  const { data, width, maxCode } = frame;
  const line = width * 3;
  const found = { across: 0, acrossAt: 0, down: 0, downAt: 0 };
  // An edge that passes through the cell is met on some row and column even when only every third is looked at.
  for (let row = top; row < top + cell; row += 3)
    for (let col = left; col < left + cell; col += 3) {
      const at = row * line + col * 3 + 1;
      const across = Math.abs(data[at + 6]! - data[at - 6]!);
      const down = Math.abs(data[at + 2 * line]! - data[at - 2 * line]!);
      if (across > found.across) [found.across, found.acrossAt] = [across, at];
      if (down > found.down) [found.down, found.downAt] = [down, at];
    }
  const place = (strength: number, at: number, upright: boolean): EdgePlace[] => {
    const scaled = (strength * 255) / maxCode;
    if (scaled < leastStrength) return [];
    const pixel = (at - 1) / 3;
    return [{ col: pixel % width, row: Math.floor(pixel / width), upright, strength: scaled }];
  };
  return [...place(found.across, found.acrossAt, true), ...place(found.down, found.downAt, false)];
}
