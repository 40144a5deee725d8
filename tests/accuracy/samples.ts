import type { Analysis, Metric } from '../../analysis/result.ts';
import type { SceneTruth, StationTruth } from '../../fixtures/scene/truth.ts';
import type { QuantityName } from './rows.ts';

/** One measured number against its truth, both in the row's unit. */
export interface Sample {
  readonly quantity: QuantityName;
  /** Station and edge, or empty. */
  readonly where: string;
  readonly truth: number;
  readonly error: number;
  /** Standard uncertainty as stated; null where none is. */
  readonly uncertainty: number | null;
}

/** Within this image height the radius has no direction and radial displacement means nothing. */
const nearCentre = 0.06;

/** Every sample that an analysis of a photograph of the target gives. */
export function samplesOf(analysis: Analysis, truth: SceneTruth): Sample[] {
  return [
    ...ringSamples(analysis, truth),
    ...truth.stations
      .filter((station) => station.inFrame)
      .flatMap((station) => [
        ...sharpnessSamples(analysis, station),
        ...fringeSamples(analysis, station),
      ]),
    ...single(analysis, 'fringe.redScale', 'fringe scale', truth.redScale, 'red'),
    ...single(analysis, 'fringe.blueScale', 'fringe scale', truth.blueScale, 'blue'),
    ...single(analysis, 'exposure.bias', 'exposure.bias', truth.exposureBias),
    ...single(analysis, 'tone.contrast', 'tone.contrast', truth.toneContrast),
    ...single(analysis, 'colour.saturation', 'colour.saturation', truth.saturation),
    ...single(analysis, 'noise.snr', 'noise.snr', truth.snrDb),
    ...single(analysis, 'shading.corner', 'shading.corner', truth.shadingCorner),
    ...single(analysis, 'distortion.corner', 'distortion.corner', truth.distortionCorner),
  ];
}

function ringSamples(analysis: Analysis, truth: SceneTruth): Sample[] {
  const found = analysis.registration?.rings ?? {};
  return Object.entries(truth.rings).map(([id, [x, y]]) => {
    const at = found[id];
    const error = at ? Math.hypot(at[0] - x, at[1] - y) : Number.POSITIVE_INFINITY;
    return { quantity: 'rings', where: id, truth: 0, error, uncertainty: null };
  });
}

function find(analysis: Analysis, name: string, zone?: string, edge?: string): Metric | undefined {
  return analysis.metrics.find((m) => m.name === name && m.zone === zone && m.edge === edge);
}

/** A metric that is left out counts as an infinite error: leaving out must not look like precision. */
function sampleOf(
  metric: Metric | undefined,
  quantity: QuantityName,
  where: string,
  truth: number,
): Sample {
  if (!metric)
    return { quantity, where, truth, error: Number.POSITIVE_INFINITY, uncertainty: null };
  return { quantity, where, truth, error: metric.value - truth, uncertainty: metric.uncertainty };
}

function single(
  analysis: Analysis,
  name: string,
  quantity: QuantityName,
  truth: number,
  where = '',
): Sample[] {
  return [sampleOf(find(analysis, name), quantity, where, truth)];
}

function sharpnessSamples(analysis: Analysis, station: StationTruth): Sample[] {
  return (['vertical', 'horizontal'] as const).map((edge) => {
    const truth = station[edge].mtf50;
    const metric = find(analysis, 'sharpness.mtf50', station.id, edge);
    const where = `${station.id} ${edge} of ${truth.toFixed(3)} cy/px`;
    const sample = sampleOf(metric, 'mtf50', where, truth);
    const percent = 100 / truth;
    const uncertainty = sample.uncertainty === null ? null : sample.uncertainty * percent;
    return { ...sample, error: sample.error * percent, uncertainty };
  });
}

function fringeSamples(analysis: Analysis, station: StationTruth): Sample[] {
  if (station.imageHeight < nearCentre) return [];
  return (['red', 'blue'] as const).flatMap((channel) => {
    const truth = station[channel];
    const metric = find(analysis, `fringe.${channel}`, station.id);
    const where = `${station.id} ${channel}`;
    const across = metric && { ...metric, value: metric.tangential ?? Number.NaN };
    return [
      sampleOf(metric, 'fringe', where, truth.radial),
      sampleOf(across, 'fringe across', where, truth.tangential),
    ];
  });
}
