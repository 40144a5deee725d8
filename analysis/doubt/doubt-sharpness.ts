import type { Metric, Warning } from '../result.ts';
import { type Doubt, noDoubt } from './doubt.ts';

/** ln of the mtf50 of the one direction over the other's, alike at every station, beyond which the camera moved. Our choice: 20 %. */
const muchUnlike = 0.18;
/** Share of the stations that must lean the same way: a lens's astigmatism turns with the radius and leans both ways. Our choice. */
const leaning = 0.85;
/** The centre's mtf50 below which no camera in focus lies, cy/px: 10–90 % over five pixels. Our choice. */
const outOfFocus = 0.1;
/** The centre below this share of the sharpest other station: the focus lay elsewhere. Our choice. */
const sharperElsewhere = 0.6;
const fewestStations = 4;

/** Motion blur and missed focus, told from mtf50 by station and direction. The numbers stand: they are this photograph's. */
export function doubtSharpness(metrics: readonly Metric[]): Doubt {
  const stations = byStation(metrics);
  const warnings = [...warnOfMotion(stations), ...warnOfFocus(stations)];
  return warnings.length > 0 ? { warnings, withdrawn: [] } : noDoubt;
}

interface Station {
  readonly id: string;
  vertical?: number;
  horizontal?: number;
}

function byStation(metrics: readonly Metric[]): Station[] {
  const stations = new Map<string, Station>();
  for (const { name, zone, edge, value } of metrics) {
    if (name !== 'sharpness.mtf50' || !zone || !edge) continue;
    const station = stations.get(zone) ?? { id: zone };
    station[edge] = value;
    stations.set(zone, station);
  }
  return [...stations.values()];
}

function warnOfMotion(stations: readonly Station[]): Warning[] {
  const ratios = stations
    .filter(({ vertical, horizontal }) => vertical && horizontal)
    .map(({ vertical, horizontal }) => Math.log(vertical! / horizontal!))
    .sort((a, b) => a - b);
  if (ratios.length < fewestStations) return [];
  const median = ratios[ratios.length >> 1]!;
  const alike = ratios.filter((ratio) => ratio * median > 0 && Math.abs(ratio) > muchUnlike / 2);
  if (Math.abs(median) < muchUnlike || alike.length < leaning * ratios.length) return [];
  const [blurred, way] = median < 0 ? ['upright', 'sideways'] : ['level', 'up and down'];
  const percent = Math.round(100 * (1 - Math.exp(-Math.abs(median))));
  return [
    {
      code: 'motion-blur',
      message: `Over the whole picture ${blurred} edges are ${percent} % less sharp than the others: the camera or the target moved ${way} during the exposure. Use a tripod and the self-timer, or a shorter time, and photograph again.`,
    },
  ];
}

function warnOfFocus(stations: readonly Station[]): Warning[] {
  // The better of the two directions: motion alone is no missed focus.
  const sharpest = (s: Station) => Math.max(s.vertical ?? 0, s.horizontal ?? 0);
  const centre = stations.find(({ id }) => id === 'C');
  if (!centre) return [];
  const here = sharpest(centre);
  const others = stations.filter(({ id }) => id !== 'C').map(sharpest);
  const best = Math.max(here, ...others);
  if (here >= outOfFocus && here >= sharperElsewhere * best) return [];
  const where =
    here >= sharperElsewhere * best
      ? `Even the centre is soft (${here.toFixed(2)} cy/px)`
      : `The centre is softer than the rest (${here.toFixed(2)} against ${best.toFixed(2)} cy/px)`;
  return [
    {
      code: 'focus-missed',
      message: `${where}, so the focus seems to have been missed. Focus on the target’s centre, check the distance and photograph again.`,
    },
  ];
}
