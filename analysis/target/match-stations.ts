import type { Point } from '../image.ts';
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
  /** Stations that have one. */
  readonly count: number;
  readonly score: number;
}

// Tilt changes the scale over the target and distortion moves its corners: a pair may be this much longer or shorter than printed.
const scaleTolerance = 0.2;
// How far a station may lie from where a pair of others puts it, as a share of its distance from the pair's middle, and in units.
const driftShare = 0.1;
const driftUnits = 14;
const leastStations = 5;

// With so many stations in their places the search ends: chance doesn't put eleven of thirteen there.
const enoughStations = 11;
const mostCandidates = 40;

/**
 * The ways to lay the target's stations on the candidates, best first. The pattern looks the same turned by 180°, so each stands for
 * two; a mirrored one is never among them.
 * @param candidates the clearest first
 */
export function matchStations(
  candidates: readonly StationCandidate[],
  target: Target,
  most: number,
): StationMatch[] {
  const matches = new Map<string, StationMatch>();
  const pairs = printedPairs(target);
  const clearest = candidates.slice(0, mostCandidates);
  search: for (let j = 1; j < clearest.length; j++) {
    for (let i = 0; i < j; i++) {
      const pair = [clearest[i]!, clearest[j]!] as const;
      if (matchPair(clearest, pair, target, pairs, matches)) break search;
    }
  }
  return [...matches.values()].sort((p, q) => q.score - p.score).slice(0, most);
}

interface PrintedPair {
  readonly from: Point;
  readonly to: Point;
  readonly length: number;
}

/** All ordered pairs of stations; of a pair and the one across the centre, which is the same turned by 180°, only one. */
function printedPairs({ stations }: Target): PrintedPair[] {
  const pairs: PrintedPair[] = [];
  for (const from of stations) {
    for (const to of stations) {
      if (from === to || from.x + to.x < 0) continue;
      if (from.x + to.x === 0 && from.y + to.y < 0) continue;
      pairs.push({ from, to, length: Math.hypot(to.x - from.x, to.y - from.y) });
    }
  }
  return pairs;
}

/** Adds the matches that two candidates allow; true once one is so good that the search may end. */
function matchPair(
  candidates: readonly StationCandidate[],
  [p, q]: readonly [StationCandidate, StationCandidate],
  target: Target,
  pairs: readonly PrintedPair[],
  matches: Map<string, StationMatch>,
): boolean {
  const ratio = p.scale / q.scale;
  if (ratio < 0.6 || ratio > 1 / 0.6) return false;
  const dx = q.x - p.x;
  const dy = q.y - p.y;
  const distance = (2 * Math.hypot(dx, dy)) / (p.scale + q.scale);
  for (const { from, to, length } of pairs) {
    if (Math.abs(distance / length - 1) > scaleTolerance) continue;
    const du = to.x - from.x;
    const dv = to.y - from.y;
    const a = (dx * du + dy * dv) / length ** 2;
    const b = (dy * du - dx * dv) / length ** 2;
    const x = p.x - (a * from.x - b * from.y);
    const y = p.y - (b * from.x + a * from.y);
    const middle = { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 };
    const match = assign(candidates, { target, a, b, x, y }, middle);
    if (!match) continue;
    const key = match.assigned.join();
    const known = matches.get(key);
    if (!known || known.score < match.score) matches.set(key, match);
    if (match.count >= enoughStations) return true;
  }
  return false;
}

type Placement = Pick<StationMatch, 'target' | 'a' | 'b' | 'x' | 'y'>;

function assign(
  candidates: readonly StationCandidate[],
  placement: Placement,
  middle: Point,
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
    const limit = ((driftShare * away + driftUnits) * scale) ** 2;
    let nearest = limit;
    for (let c = 0; c < candidates.length; c++) {
      const candidate = candidates[c]!;
      const distance = (candidate.x - px) ** 2 + (candidate.y - py) ** 2;
      if (distance < nearest && Math.abs(candidate.scale / scale - 1) < 0.35) {
        nearest = distance;
        assigned[s] = c;
      }
    }
    if (assigned[s]! < 0) continue;
    count++;
    score += 1 - (0.5 * nearest) / limit;
  }
  return count < leastStations ? null : { ...placement, assigned, count, score };
}
