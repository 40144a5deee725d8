import type { Frame } from '../image.ts';
import type { Metric, Plots, Warning } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { fitShading, type ShadingFit, shadingAt, shadingUncertainty } from './fit-shading.ts';
import { readBackground } from './read-background.ts';

export interface ShadingResult {
  readonly metrics: Metric[];
  readonly warnings: Warning[];
  /** Light in EV against the frame's centre on a grid over the frame; null when it can't be told. */
  readonly plot: NonNullable<Plots['shading']> | null;
  /** Light at an image point over the light at the frame's centre, 1 where nothing is known. */
  correctionAt(x: number, y: number): number;
}

const columns = 16;
const rows = 12;
const fewestSpots = 8;

/**
 * Light at the frame's four corners against its centre, EV, negative darker (following ISO 17957): `shading.corner` by corner and,
 * without a zone, their mean; `shading.asymmetry`, the spread of the four. Read from the plain background through `lightOf`, and carried
 * on to the corners by a smooth fit, with the uncertainty that adds. Uneven light on the target counts as well: it can't be told apart.
 */
export function measureShading(
  frame: Frame,
  registration: Registration,
  lightOf?: (code0to1: number) => number,
): ShadingResult {
  const spots = readBackground(frame, registration, lightOf);
  const fit = spots.length < fewestSpots ? null : fitShading(spots);
  if (!fit) return nothing(spots.length);
  const plot = { columns, rows, ev: gridOf(frame, fit) };
  return {
    metrics: cornerMetrics(fit, frame),
    warnings: [],
    plot,
    correctionAt: (x, y) => 2 ** shadingAt(fit, ...position(frame, x, y)),
  };
}

function nothing(found: number): ShadingResult {
  const message = `Shading needs ${fewestSpots} plain spots of the background in the frame, unclipped; ${found} could be used. Frame the whole target and expose it between black and white.`;
  return {
    metrics: [],
    warnings: [{ code: 'shading-spots', message }],
    plot: null,
    correctionAt: () => 1,
  };
}

/** Image pixels to half diagonals from the frame's centre. */
function position(frame: Frame, x: number, y: number): [number, number] {
  const half = Math.hypot(frame.width, frame.height) / 2;
  return [(x - frame.width / 2) / half, (y - frame.height / 2) / half];
}

export function gridOf(frame: Frame, fit: ShadingFit): number[] {
  const ev: number[] = [];
  for (let row = 0; row < rows; row++)
    for (let col = 0; col < columns; col++) {
      const x = ((col + 0.5) / columns) * frame.width;
      const y = ((row + 0.5) / rows) * frame.height;
      ev.push(shadingAt(fit, ...position(frame, x, y)));
    }
  return ev;
}

export function cornerMetrics(fit: ShadingFit, frame: Frame): Metric[] {
  const { width, height } = frame;
  const corners = [
    { zone: 'NW', at: position(frame, 0, 0) },
    { zone: 'NE', at: position(frame, width, 0) },
    { zone: 'SW', at: position(frame, 0, height) },
    { zone: 'SE', at: position(frame, width, height) },
  ].map(({ zone, at }) => ({ zone, at, value: shadingAt(fit, ...at) }));
  const name = 'shading.corner';
  const metrics: Metric[] = corners.map(({ zone, at, value }) => ({
    name,
    zone,
    value,
    unit: 'EV',
    uncertainty: shadingUncertainty(fit, [{ at, share: 1 }]),
  }));
  const mean = corners.reduce((s, c) => s + c.value, 0) / 4;
  const uncertainty = shadingUncertainty(
    fit,
    corners.map(({ at }) => ({ at, share: 0.25 })),
  );
  metrics.push({ name, value: mean, unit: 'EV', uncertainty });
  const sorted = corners.toSorted((a, b) => a.value - b.value);
  const [darkest, lightest] = [sorted[0]!, sorted[3]!];
  metrics.push({
    name: 'shading.asymmetry',
    value: lightest.value - darkest.value,
    unit: 'EV',
    uncertainty: shadingUncertainty(fit, [
      { at: lightest.at, share: 1 },
      { at: darkest.at, share: -1 },
    ]),
  });
  return metrics;
}
