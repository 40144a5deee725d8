import type { Metric } from '../result.ts';
import type { EdgeSharpness } from './measure-sharpness.ts';
import type { Estimate } from './read-profile.ts';

export interface StationSharpness {
  readonly id: string;
  /** Image height of the station, 0…1. */
  readonly height: number;
  readonly edges: readonly EdgeSharpness[];
}

type Quantity = Exclude<keyof EdgeSharpness, 'edge'>;

const units: readonly (readonly [Quantity, string])[] = [
  ['mtf50', 'cy/px'],
  ['mtf10', 'cy/px'],
  ['nyquist', '%'],
  ['rise', 'px'],
  ['overshoot', '%'],
];
const corners = ['NW', 'NE', 'SW', 'SE'];

/** Groups of stations, corners over centre, and how far the four corners differ. */
export function summariseStations(
  stations: readonly StationSharpness[],
  frameHeight: number,
): Metric[] {
  const groups = {
    centre: stations.filter((s) => s.id === 'C'),
    partway: stations.filter((s) => isPartway(s)),
    corners: stations.filter((s) => corners.includes(s.id)),
  };
  const metrics: Metric[] = [];
  for (const [zone, members] of Object.entries(groups))
    for (const [quantity, unit] of units) {
      const mean = meanOf(members.map((s) => ofStation(s, quantity)));
      if (!mean) continue;
      const lwph = quantity === 'mtf50' ? { lwph: 2 * mean.value * frameHeight } : {};
      metrics.push({ name: `sharpness.${quantity}`, zone, ...mean, unit, ...lwph });
    }
  metrics.push(...cornerRatio(groups.centre, groups.corners), ...asymmetry(groups.corners));
  return metrics;
}

function isPartway(station: StationSharpness): boolean {
  const inBand = station.height >= 0.3 && station.height <= 0.75;
  return inBand && station.id !== 'C' && !corners.includes(station.id);
}

/** Frequencies and rises combine as geometric means (an edge twice as sharp one way is as far off as half as sharp), percentages plainly. */
function ofStation(station: StationSharpness, quantity: Quantity): Estimate | null {
  const values = station.edges.map((e) => e[quantity]).filter((v) => v !== null);
  if (values.length === 0) return null;
  if (quantity === 'nyquist' || quantity === 'overshoot') return meanOf(values);
  const value = Math.exp(values.reduce((s, v) => s + Math.log(v.value), 0) / values.length);
  const relative = Math.hypot(...values.map((v) => v.uncertainty / v.value)) / values.length;
  return { value, uncertainty: value * relative };
}

function meanOf(estimates: readonly (Estimate | null)[]): Estimate | null {
  const present = estimates.filter((e) => e !== null);
  if (present.length === 0) return null;
  const n = present.length;
  return {
    value: present.reduce((s, e) => s + e.value, 0) / n,
    uncertainty: Math.hypot(...present.map((e) => e.uncertainty)) / n,
  };
}

function cornerRatio(
  centre: readonly StationSharpness[],
  members: readonly StationSharpness[],
): Metric[] {
  const middle = meanOf(centre.map((s) => ofStation(s, 'mtf50')));
  const outer = meanOf(members.map((s) => ofStation(s, 'mtf50')));
  if (!middle || !outer) return [];
  const value = (100 * outer.value) / middle.value;
  const relative = Math.hypot(outer.uncertainty / outer.value, middle.uncertainty / middle.value);
  return [{ name: 'sharpness.cornerRatio', value, unit: '%', uncertainty: value * relative }];
}

/** Mean range of four normal deviates, in their deviation: what noise alone would show (statistical tables, d2 for n = 4). */
const rangeOfFour = 2.059;

/** (best − worst) / mean of the four corners, less the spread that their own uncertainty accounts for. */
function asymmetry(members: readonly StationSharpness[]): Metric[] {
  const values = members.map((s) => ofStation(s, 'mtf50')).filter((v) => v !== null);
  if (values.length !== 4) return [];
  const mean = values.reduce((s, v) => s + v.value, 0) / 4;
  const range = Math.max(...values.map((v) => v.value)) - Math.min(...values.map((v) => v.value));
  const doubt = Math.hypot(...values.map((v) => v.uncertainty)) / 2;
  const spread = Math.sqrt(Math.max(0, range ** 2 - (rangeOfFour * doubt) ** 2));
  return [
    {
      name: 'sharpness.asymmetry',
      value: (100 * spread) / mean,
      unit: '%',
      uncertainty: (100 * Math.SQRT2 * doubt) / mean,
    },
  ];
}
