import type { Frame } from '../image.ts';
import type { Registration } from '../target/registration.ts';

/** Mean of a station's pad or square, away from its edges. */
export interface Plateau {
  readonly reflectance: number;
  /** Centre of the station, image pixels. */
  readonly x: number;
  readonly y: number;
  /** Mean of each channel in the file's linear light, and its standard uncertainty from noise. */
  readonly linear: readonly [number, number, number];
  readonly uncertainty: readonly [number, number, number];
}

/** Target units that the pixels stay clear of an edge. */
const clear = 10;
const fewestPixels = 40;
/** Neighbouring pixels share noise after demosaicing and compression; this many count as one. Common practice, no source. */
const pixelsPerIndependent = 4;

/** Pads and squares of all stations in the frame that are unclipped: greys as light and as dark as the edges' own two sides. */
export function samplePlateaus(frame: Frame, registration: Registration): Plateau[] {
  const { station, stations } = registration.target;
  const half = station.squareSide / 2;
  const turn = (station.rotationDegrees * Math.PI) / 180;
  const [c, s] = [Math.cos(turn), Math.sin(turn)];
  const inSquare = (u: number, v: number) =>
    Math.max(Math.abs(c * u + s * v), Math.abs(c * v - s * u)) < half - clear;
  const onPad = (u: number, v: number) =>
    Math.hypot(u, v) < station.padRadius - clear &&
    Math.max(Math.abs(c * u + s * v), Math.abs(c * v - s * u)) > half + clear;
  return stations.flatMap(({ x, y }) => {
    const read = (reflectance: number, inside: typeof inSquare) =>
      readPlateau(frame, registration, { x, y }, reflectance, inside);
    const plateaus = [
      read(station.square.reflectance, inSquare),
      read(station.pad.reflectance, onPad),
    ];
    return plateaus.filter((plateau) => plateau !== null);
  });
}

function readPlateau(
  frame: Frame,
  registration: Registration,
  at: { x: number; y: number },
  reflectance: number,
  inside: (u: number, v: number) => boolean,
): Plateau | null {
  const { data, width, height, maxCode, toLinear } = frame;
  const { x, y } = registration.toImage(at.x, at.y);
  const [a, b, c, d] = registration.jacobian(at.x, at.y);
  const determinant = a * d - b * c;
  const radius = registration.target.station.padRadius;
  const [reachX, reachY] = [radius * Math.hypot(a, b), radius * Math.hypot(c, d)];
  if (x < reachX || y < reachY || x > width - reachX || y > height - reachY) return null;
  const low = maxCode / 255;
  const high = maxCode - low;
  // Some two thousand pixels are enough.
  const step = Math.max(1, Math.floor(Math.sqrt(reachX * reachY) / 45));
  const sum = [0, 0, 0];
  const squares = [0, 0, 0];
  let count = 0;
  let clipped = 0;
  for (let row = Math.ceil(y - reachY); row < y + reachY - 1; row += step)
    for (let col = Math.ceil(x - reachX); col < x + reachX - 1; col += step) {
      const [dx, dy] = [col + 0.5 - x, row + 0.5 - y];
      if (!inside((d * dx - b * dy) / determinant, (a * dy - c * dx) / determinant)) continue;
      count++;
      for (let channel = 0; channel < 3; channel++) {
        const code = data[(row * width + col) * 3 + channel]!;
        if (code <= low || code >= high) clipped++;
        const light = toLinear[channel]![code]!;
        sum[channel]! += light;
        squares[channel]! += light * light;
      }
    }
  if (count < fewestPixels || clipped > count / 100) return null;
  const linear = sum.map((total) => total / count);
  const uncertainty = linear.map((mean, i) =>
    Math.sqrt((Math.max(0, squares[i]! / count - mean * mean) * pixelsPerIndependent) / count),
  );
  return {
    reflectance,
    x,
    y,
    linear: linear as unknown as Plateau['linear'],
    uncertainty: uncertainty as unknown as Plateau['uncertainty'],
  };
}
