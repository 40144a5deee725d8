/** Places words beside the lines they name, so that no legend is needed and nothing is written over. */
export interface Line {
  label: string;
  /** Drawing units, left to right. */
  points: readonly (readonly [number, number])[];
}
interface Box {
  left: number;
  right: number;
  top: number;
  bottom: number;
}
export interface PlacedLabel {
  x: number;
  y: number;
  anchor: 'start' | 'end';
}

/** Mean advance of Archivo at 600 is close to 0.56 em. */
const advance = 0.56;

/** For each line the place with the fewest crossings of lines and words, near the line's own middle. */
export function placeLabels(lines: readonly Line[], area: Box, fontSize: number): PlacedLabel[] {
  const taken: Box[] = [];
  const dots = lines.map(({ points }) => thicken(points));
  return lines.map((line, own) => {
    let best = { cost: Number.POSITIVE_INFINITY, place: candidates(line, fontSize)[0] };
    for (const place of candidates(line, fontSize)) {
      const cost = costOf(place.box, area, taken, dots, own) + place.farFromMiddle;
      if (cost < best.cost) best = { cost, place };
    }
    if (!best.place) return { x: area.left, y: area.top, anchor: 'start' };
    taken.push(best.place.box);
    return best.place;
  });
}

function candidates({ label, points }: Line, fontSize: number) {
  const width = label.length * fontSize * advance;
  const gap = fontSize * 0.5;
  return points.flatMap(([x, y], index) => {
    const farFromMiddle = Math.abs(index / points.length - 0.5) * 3;
    const right = { x: x + gap, y: y - gap * 0.4, anchor: 'start' as const, farFromMiddle };
    const left = {
      x: x - gap,
      y: y + fontSize,
      anchor: 'end' as const,
      farFromMiddle: farFromMiddle + 0.6,
    };
    return [right, left].map((place) => ({ ...place, box: boxOf(place, width, fontSize) }));
  });
}

function boxOf(place: PlacedLabel, width: number, fontSize: number): Box {
  const left = place.anchor === 'start' ? place.x : place.x - width;
  return {
    left,
    right: left + width,
    top: place.y - fontSize * 0.85,
    bottom: place.y + fontSize * 0.25,
  };
}

function costOf(box: Box, area: Box, taken: Box[], dots: Line['points'][], own: number): number {
  let cost = 0;
  if (
    box.left < area.left ||
    box.right > area.right ||
    box.top < area.top ||
    box.bottom > area.bottom
  ) {
    cost += 100;
  }
  for (const other of taken) if (overlap(box, other)) cost += 50;
  for (const [index, points] of dots.entries()) {
    const hits = points.filter(
      ([x, y]) => x > box.left - 2 && x < box.right + 2 && y > box.top && y < box.bottom,
    );
    cost += hits.length * (index === own ? 3 : 4);
  }
  return cost;
}

function overlap(a: Box, b: Box): boolean {
  return a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;
}

/** Points close enough together that a word can't slip between two of them. */
function thicken(points: Line['points']): Line['points'] {
  return points.flatMap(([x, y], index) => {
    const next = points[index + 1];
    if (!next) return [[x, y] as const];
    return [0, 0.25, 0.5, 0.75].map((t) => [x + (next[0] - x) * t, y + (next[1] - y) * t] as const);
  });
}
