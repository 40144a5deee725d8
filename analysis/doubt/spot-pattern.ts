import type { Frame } from '../image.ts';
import type { Registration } from '../target/registration.ts';

/** Side of the square that is looked at in each plain spot, px: it divides into JPEG's blocks, whose grid can then be told apart. */
const largestSide = 32;
const smallestSide = 16;
const fewestSpots = 4;

/** What the plain spots show beside light: how alike neighbours are, and any regular pattern. */
export interface SpotPattern {
  /** Correlation of a pixel's noise with its neighbour's, −1…1: 0 for a sensor without processing. */
  readonly neighbours: number;
  /** Standard deviation of a pixel in codes of green. */
  readonly sigma: number;
  /** The strongest frequency, cy/px, its amplitude as a share of the light, how far it stands out, and whether it is coloured. */
  readonly peak: {
    readonly frequency: number;
    /** Of its wave, degrees clockwise from x. */
    readonly direction: number;
    readonly amplitude: number;
    readonly prominence: number;
    /** Phase of red against blue, degrees 0…180: stripes of colour beside each other are apart, grey patterns together. */
    readonly colourPhase: number;
  };
}

/** @returns null with fewer than four plain spots of 16 px and more, unclipped, in the frame */
export function readSpotPattern(frame: Frame, registration: Registration): SpotPattern | null {
  const [a, b, c, d] = registration.jacobian(0, 0);
  const scale = Math.sqrt(Math.abs(a * d - b * c));
  const radius = Math.min(...registration.target.plain.map((p) => p.radius));
  const fits = Math.floor((0.9 * Math.SQRT2 * radius * scale) / 8) * 8;
  const side = Math.min(largestSide, fits);
  if (side < smallestSide) return null;
  const spots = registration.target.plain.flatMap(({ x, y }) => {
    const at = registration.toImage(x, y);
    const planes = readPlanes(
      frame,
      Math.round(at.x - side / 2),
      Math.round(at.y - side / 2),
      side,
    );
    return planes ? [planes] : [];
  });
  if (spots.length < fewestSpots) return null;
  return {
    neighbours: mean(spots.map(({ luminance }) => neighbourCorrelation(luminance, side))),
    sigma: mean(spots.map(({ sigmaCode }) => sigmaCode)),
    peak: findPeak(spots, side),
  };
}

interface SpotPlanes {
  /** Light over its mean, less a plane, each channel and their mean. */
  readonly red: Float64Array;
  readonly blue: Float64Array;
  readonly luminance: Float64Array;
  readonly sigmaCode: number;
}

function readPlanes(frame: Frame, left: number, top: number, side: number): SpotPlanes | null {
  const { data, width, height, maxCode, toLinear } = frame;
  if (left < 0 || top < 0 || left + side > width || top + side > height) return null;
  const low = maxCode / 255;
  const planes = [0, 1, 2].map(() => new Float64Array(side * side));
  const codes = new Float64Array(side * side);
  for (let i = 0; i < side * side; i++) {
    const at = ((top + Math.floor(i / side)) * width + left + (i % side)) * 3;
    for (let channel = 0; channel < 3; channel++) {
      const code = data[at + channel]!;
      if (code <= low || code >= maxCode - low) return null;
      planes[channel]![i] = toLinear[channel]![code]!;
    }
    codes[i] = data[at + 1]!;
  }
  for (const plane of planes) flatten(plane, side, mean(plane));
  flatten(codes, side, 1);
  const [red, green, blue] = planes as [Float64Array, Float64Array, Float64Array];
  return {
    red,
    blue,
    luminance: green.map((g, i) => 0.2126 * red[i]! + 0.7152 * g + 0.0722 * blue[i]!),
    sigmaCode: Math.sqrt(mean(codes.map((v) => v * v))),
  };
}

/** Subtracts the plane of least squares and divides by `unit`. */
function flatten(plane: Float64Array, side: number, unit: number): void {
  const middle = (side - 1) / 2;
  const spread = (side * side * (side * side - 1)) / 12;
  const average = mean(plane);
  let sx = 0;
  let sy = 0;
  for (let i = 0; i < plane.length; i++) {
    sx += plane[i]! * ((i % side) - middle);
    sy += plane[i]! * (Math.floor(i / side) - middle);
  }
  for (let i = 0; i < plane.length; i++) {
    const x = (i % side) - middle;
    const y = Math.floor(i / side) - middle;
    plane[i] = (plane[i]! - average - (sx * x + sy * y) / spread) / unit;
  }
}

function neighbourCorrelation(plane: Float64Array, side: number): number {
  let product = 0;
  let square = 0;
  for (let i = 0; i < plane.length; i++) {
    square += plane[i]! ** 2;
    if ((i + 1) % side !== 0) product += plane[i]! * plane[i + 1]!;
  }
  return square > 0 ? (product / square) * (side / (side - 1)) : 1;
}

/** Averages the spots' periodograms (Welch, IEEE Trans. AU-15 (1967) 70) and looks for a bin that stands out. */
function findPeak(spots: readonly SpotPlanes[], side: number): SpotPattern['peak'] {
  const window = Float64Array.from(
    { length: side },
    (_, i) => Math.sin((Math.PI * (i + 0.5)) / side) ** 2,
  );
  const transform = createTransform(side, window);
  const half = side / 2;
  const bins = side * (half + 1);
  const power = new Float64Array(bins);
  const cross = [new Float64Array(bins), new Float64Array(bins)] as const;
  for (const spot of spots) {
    const [rr, ri] = transform(spot.red);
    const [br, bi] = transform(spot.blue);
    const [yr, yi] = transform(spot.luminance);
    for (let k = 0; k < bins; k++) {
      const red = rr[k]! ** 2 + ri[k]! ** 2;
      const blue = br[k]! ** 2 + bi[k]! ** 2;
      power[k]! += (red + blue + yr[k]! ** 2 + yi[k]! ** 2) / 3 / spots.length;
      cross[0][k]! += rr[k]! * br[k]! + ri[k]! * bi[k]!;
      cross[1][k]! += ri[k]! * br[k]! - rr[k]! * bi[k]!;
    }
  }
  const looked = Array.from({ length: bins }, (_, k) => k).filter((k) => mayPeak(k, side));
  const sorted = looked.map((k) => power[k]!).sort((p, q) => p - q);
  const floor = sorted[Math.floor(0.75 * sorted.length)]!;
  const best = looked.reduce((p, q) => (power[q]! > power[p]! ? q : p), looked[0]!);
  const { fx, fy } = frequencyOf(best, side);
  const gain = window.reduce((sum, w) => sum + w, 0) ** 2;
  return {
    frequency: Math.hypot(fx, fy),
    direction: (Math.atan2(fy, fx) * 180) / Math.PI,
    amplitude: (2 * Math.sqrt(power[best]!)) / gain,
    prominence: power[best]! / Math.max(floor, 1e-12),
    colourPhase: Math.abs((Math.atan2(cross[1][best]!, cross[0][best]!) * 180) / Math.PI),
  };
}

function frequencyOf(k: number, side: number): { fx: number; fy: number } {
  const row = Math.floor(k / (side / 2 + 1));
  return { fx: (k % (side / 2 + 1)) / side, fy: (row > side / 2 ? row - side : row) / side };
}

/** Not slow gradients, and not the grid of JPEG's blocks: multiples of 1/8 cy/px along either axis. */
function mayPeak(k: number, side: number): boolean {
  const { fx, fy } = frequencyOf(k, side);
  if (Math.hypot(fx, fy) < 2.5 / side) return false;
  const onGrid = (f: number) => Math.abs(f * 8 - Math.round(f * 8)) < 1e-6;
  return !(onGrid(fx) && onGrid(fy));
}

/** Discrete Fourier transform of a windowed square, half plane fx ≥ 0: rows then columns, by tables. */
function createTransform(side: number, window: Float64Array) {
  const half = side / 2 + 1;
  const cos = Float64Array.from({ length: side }, (_, i) => Math.cos((2 * Math.PI * i) / side));
  const sin = Float64Array.from({ length: side }, (_, i) => -Math.sin((2 * Math.PI * i) / side));
  const row = new Float64Array(side);
  const rowReal = new Float64Array(side * half);
  const rowImaginary = new Float64Array(side * half);
  return (plane: Float64Array): [Float64Array, Float64Array] => {
    for (let y = 0; y < side; y++) {
      for (let x = 0; x < side; x++) row[x] = plane[y * side + x]! * window[x]! * window[y]!;
      for (let k = 0; k < half; k++) {
        rowReal[y * half + k] = project(row, cos, k);
        rowImaginary[y * half + k] = project(row, sin, k);
      }
    }
    const real = new Float64Array(side * half);
    const imaginary = new Float64Array(side * half);
    const column = { real: new Float64Array(side), imaginary: new Float64Array(side) };
    for (let k = 0; k < half; k++) {
      for (let y = 0; y < side; y++) {
        column.real[y] = rowReal[y * half + k]!;
        column.imaginary[y] = rowImaginary[y * half + k]!;
      }
      for (let l = 0; l < side; l++) {
        real[l * half + k] = project(column.real, cos, l) - project(column.imaginary, sin, l);
        imaginary[l * half + k] = project(column.real, sin, l) + project(column.imaginary, cos, l);
      }
    }
    return [real, imaginary];
  };
}

/** Σ value · wave at `frequency` turns a length; the wave's table is as long as the values. */
function project(values: Float64Array, wave: Float64Array, frequency: number): number {
  const side = wave.length;
  let sum = 0;
  for (let i = 0, turn = 0; i < side; i++) {
    sum += values[i]! * wave[turn]!;
    turn += frequency;
    if (turn >= side) turn -= side;
  }
  return sum;
}

function mean(values: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]!;
  return sum / values.length;
}
