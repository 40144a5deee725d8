import type { ColourPlot, StationPlot } from '@/analysis/result';
import { valueAt } from '@/components/pictures/draw';
import type { RunResult } from '@/lib/shared/api';
import { type Reading, stationSharpness } from '@/lib/shared/findings';
import type { ReportContent } from '@/lib/shared/report';

export const colourPoints = (colours: readonly ColourPlot[]): ReportContent['colours'] =>
  colours.map(({ id, kind, reference, measured, deltaE2000, measuredRgb }) => ({
    id,
    kind,
    reference,
    measured,
    deltaE2000,
    rgb: measuredRgb,
  }));

/** The mean of a station's edges, on the first edge's frequencies. */
export function meanCurve(
  station: StationPlot,
): { frequency: number[]; response: number[] } | null {
  const [first] = station.curves;
  if (!first) return null;
  const response = first.frequency.map(
    (f) =>
      station.curves.reduce((sum, c) => sum + (valueAt(c.frequency, c.response, f) ?? 0), 0) /
      station.curves.length,
  );
  return { frequency: first.frequency, response };
}

/** Curves worth drawing: the middle, the weakest corner, and the best corner between them. */
export function tellingCurves(stations: readonly StationPlot[]) {
  const corners = stations
    .filter(({ id, mtf50 }) => /^[NS][EW]$/.test(id) && mtf50 !== null)
    .sort((a, b) => (a.mtf50 ?? 0) - (b.mtf50 ?? 0));
  const middle = stations.find(({ id }) => id === 'C');
  const weakest = corners[0];
  const best = corners.length > 1 ? corners.at(-1) : undefined;
  return [middle, weakest, best]
    .filter((station) => station !== undefined)
    .flatMap((station) => {
      const curve = meanCurve(station);
      return curve ? [{ id: station.id, weak: station === weakest, ...curve }] : [];
    });
}

/** The stations of one shot with the run's mean sharpness at each. */
export function withRunSharpness(
  stations: readonly StationPlot[],
  readings: readonly Reading[],
): StationPlot[] {
  const means = new Map(stationSharpness(readings).map(({ id, mtf50 }) => [id, mtf50]));
  return stations.map((station) => ({ ...station, mtf50: means.get(station.id) ?? null }));
}

/** Fewer peers than this close no ring. */
const enoughPeers = 3;

/** What peers reach in the middle, cy/px, or null while there are too few. */
export function peersInTheMiddle(results: readonly RunResult[]): number | null {
  const edges = results.filter((r) => r.name === 'sharpness.mtf50' && r.zone === 'C');
  const peers = edges.flatMap((r) => r.peers).filter((value) => value > 0);
  if (peers.length < enoughPeers * Math.max(edges.length, 1) || edges.length === 0) return null;
  return Math.exp(peers.reduce((sum, value) => sum + Math.log(value), 0) / peers.length);
}
