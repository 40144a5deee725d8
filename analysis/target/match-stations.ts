import type { StationCandidate } from './find-stations.ts';
import type { Target } from './target.ts';

/** A guess at where the target lies, from two stations: plane = (a u − b v + x, b u + a v + y). */
export interface StationMatch {
  readonly target: Target;
  readonly a: number;
  readonly b: number;
  readonly x: number;
  readonly y: number;
  /** Candidate of each station, −1 where there is none. */
  readonly assigned: Int32Array;
  readonly score: number;
}

// Tilt changes the scale over the target and distortion moves its corners: a pair may be this much longer or shorter than printed.
const scaleTolerance = 0.2;
// How far a station may lie from where a pair of others puts it, as a share of its distance from the pair's middle, and in units.
const driftShare = 0.1;
const driftUnits = 14;
const leastStations = 5;

/**
 * The ways to lay the target's stations on the candidates, best first. The pattern looks the same turned by 180°, so each stands for
 * two; a mirrored one is never among them.
 */
export function matchStations(
  candidates: readonly StationCandidate[],
  target: Target,
  most: number,
): StationMatch[] {
  const matches: StationMatch[] = [];
  for (let i = 0; i < candidates.length; i++) {
    for (let j = i + 1; j < candidates.length; j++) {
      matchPair(candidates, i, j, target, matches);
    }
  }
  matches.sort((p, q) => q.score - p.score);
  const distinct: StationMatch[] = [];
  for (const match of matches) {
    if (distinct.length >= most) break;
    if (!distinct.some((other) => sameAssignment(match, other, candidates.length))) {
      distinct.push(match);
    }
  }
  return distinct;
}

function matchPair(
  candidates: readonly StationCandidate[],
  i: number,
  j: number,
  target: Target,
  matches: StationMatch[],
): void {
  const p = candidates[i]!;
  const q = candidates[j]!;
  const ratio = p.scale / q.scale;
  if (ratio < 0.6 || ratio > 1 / 0.6) return;
  const scale = (p.scale + q.scale) / 2;
  const distance = Math.hypot(q.x - p.x, q.y - p.y) / scale;
  const { stations } = target;
  for (let s = 0; s < stations.length; s++) {
    for (let t = 0; t < stations.length; t++) {
      if (s === t) continue;
      const from = stations[s]!;
      const to = stations[t]!;
      // Of a pair and the pair across the centre, which is the same turned by 180°, one is enough.
      if (from.x + to.x < 0 || (from.x + to.x === 0 && from.y + to.y < 0)) continue;
      const du = to.x - from.x;
      const dv = to.y - from.y;
      const length = Math.hypot(du, dv);
      if (Math.abs(distance / length - 1) > scaleTolerance) continue;
      const a = ((q.x - p.x) * du + (q.y - p.y) * dv) / length ** 2;
      const b = ((q.y - p.y) * du - (q.x - p.x) * dv) / length ** 2;
      const x = p.x - (a * from.x - b * from.y);
      const y = p.y - (b * from.x + a * from.y);
      const middle = { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 };
      const match = assign(candidates, { target, a, b, x, y }, middle);
      if (match) matches.push(match);
    }
  }
}

type Placement = Pick<StationMatch, 'target' | 'a' | 'b' | 'x' | 'y'>;

function assign(
  candidates: readonly StationCandidate[],
  placement: Placement,
  middle: { x: number; y: number },
): StationMatch | null {
  const { target, a, b, x, y } = placement;
  const scale = Math.hypot(a, b);
  const { stations } = target;
  const assigned = new Int32Array(stations.length).fill(-1);
  let score = 0;
  let count = 0;
  for (let s = 0; s < stations.length; s++) {
    if (count + stations.length - s < leastStations) return null;
    const station = stations[s]!;
    const px = a * station.x - b * station.y + x;
    const py = b * station.x + a * station.y + y;
    const away = Math.hypot(station.x - middle.x, station.y - middle.y);
    let nearest = (driftShare * away + driftUnits) * scale;
    const limit = nearest;
    for (let c = 0; c < candidates.length; c++) {
      const candidate = candidates[c]!;
      const distance = Math.hypot(candidate.x - px, candidate.y - py);
      if (distance < nearest && Math.abs(candidate.scale / scale - 1) < 0.35) {
        nearest = distance;
        assigned[s] = c;
      }
    }
    if (assigned[s]! < 0) continue;
    count++;
    score += 1 - 0.5 * (nearest / limit) ** 2;
  }
  return count < leastStations ? null : { ...placement, assigned, score };
}

/** Whether two matches lay the same stations, or those across the centre, on the same candidates, but for two at most. */
function sameAssignment(p: StationMatch, q: StationMatch, candidateCount: number): boolean {
  const { stations } = p.target;
  const turned = stations.map((s) => stations.findIndex((t) => t.x === -s.x && t.y === -s.y));
  let same = 0;
  let opposite = 0;
  let count = 0;
  for (let s = 0; s < stations.length; s++) {
    const c = p.assigned[s]!;
    if (c < 0 || c >= candidateCount) continue;
    count++;
    if (q.assigned[s] === c) same++;
    if (q.assigned[turned[s]!] === c) opposite++;
  }
  return Math.max(same, opposite) >= count - 2;
}
