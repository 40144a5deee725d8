import type { StationPlot } from '@/analysis/result';
import type { FramePicture } from '@/lib/shared/report';

/** Below this share of the middle a station is drawn as weak. Chosen for the drawing; grading has its own limits. */
const weakShare = 0.6;

/** The frame's picture from one shot's stations; `peers` is the peers' mtf50 in the middle, to be compared with this middle. */
export function framePicture(
  stations: readonly StationPlot[],
  size: { width: number; height: number },
  peers: number | null = null,
): FramePicture | null {
  const middle = stations.find((station) => station.id === 'C')?.mtf50 ?? null;
  const best = Math.max(0, ...stations.map((station) => station.mtf50 ?? 0));
  const fullCircle = peers ?? middle ?? best;
  if (!fullCircle) return null;
  return {
    ...size,
    fullCircle,
    fullCircleMeans: peers === null ? 'centre' : 'peers',
    stations: stations.map(({ id, x, y, mtf50, red, blue }) => ({
      id,
      x,
      y,
      mtf50,
      red,
      blue,
      weak: mtf50 !== null && mtf50 < weakShare * (middle ?? fullCircle),
    })),
  };
}

const factors = [1, 2, 5, 10, 15, 20, 30, 40, 60, 80, 100, 150, 200, 300, 500];

/** How many times too long the hairs are drawn: the largest round factor that keeps the longest inside its ring. */
export function hairFactor(frame: FramePicture, ringRadius: number): number {
  const longest = Math.max(
    0,
    ...frame.stations.flatMap(({ red, blue }) => [lengthOf(red), lengthOf(blue)]),
  );
  if (longest === 0) return 1;
  return factors.findLast((factor) => factor * longest <= ringRadius) ?? 1;
}

export function lengthOf(point: { x: number; y: number } | null): number {
  return point ? Math.hypot(point.x, point.y) : 0;
}
