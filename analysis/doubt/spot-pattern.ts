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
  const high = maxCode - low;
  const [redLight, greenLight, blueLight] = toLinear;
  const plane = () => new Float64Array(side * side);
  const [red, green, blue, codes] = [plane(), plane(), plane(), plane()];
  let i = 0;
  for (let row = top; row < top + side; row++)
    for (let col = left; col < left + side; col++) {
      const at = (row * width + col) * 3;
      const r = data[at]!;
      const g = data[at + 1]!;
      const b = data[at + 2]!;
      if (Math.min(r, g, b) <= low || Math.max(r, g, b) >= high) return null;
      red[i] = redLight[r]!;
      green[i] = greenLight[g]!;
      blue[i] = blueLight[b]!;
      codes[i] = g;
      i++;
    }
  for (const channel of [red, green, blue]) flatten(channel, side, mean(channel));
  flatten(codes, side, 1);
  const luminance = plane();
  for (let k = 0; k < luminance.length; k++)
    luminance[k] = 0.2126 * red[k]! + 0.7152 * green[k]! + 0.0722 * blue[k]!;
  return { red, blue, luminance, sigmaCode: Math.sqrt(meanSquare(codes)) };
}

/** Subtracts the plane of least squares and divides by `unit`. */
function flatten(plane: Float64Array, side: number, unit: number): void {
  const middle = (side - 1) / 2;
  const spread = (side * side * (side * side - 1)) / 12;
  const average = mean(plane);
  let sx = 0;
  let sy = 0;
  for (let y = 0, i = 0; y < side; y++)
    for (let x = 0; x < side; x++, i++) {
      sx += plane[i]! * (x - middle);
      sy += plane[i]! * (y - middle);
    }
  const perColumn = sx / spread;
  const perRow = sy / spread;
  for (let y = 0, i = 0; y < side; y++)
    for (let x = 0; x < side; x++, i++) {
      const level = average + perColumn * (x - middle) + perRow * (y - middle);
      plane[i] = (plane[i]! - level) / unit;
    }
}

function neighbourCorrelation(plane: Float64Array, side: number): number {
  let product = 0;
  let square = 0;
  for (let i = 0; i < plane.length; i++) {
    square += plane[i]! * plane[i]!;
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
  const share = 1 / (3 * spots.length);
  for (const spot of spots) {
    const red = transform(spot.red);
    const blue = transform(spot.blue);
    const luminance = transform(spot.luminance);
    addSpectra(power, cross, share, red, blue, luminance);
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

interface Spectrum {
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
}

function addSpectra(
  power: Float64Array,
  [inStep, outOfStep]: readonly [Float64Array, Float64Array],
  share: number,
  { real: rr, imaginary: ri }: Spectrum,
  { real: br, imaginary: bi }: Spectrum,
  { real: yr, imaginary: yi }: Spectrum,
): void {
  for (let k = 0; k < power.length; k++) {
    const red = rr[k]! * rr[k]! + ri[k]! * ri[k]!;
    const blue = br[k]! * br[k]! + bi[k]! * bi[k]!;
    power[k]! += (red + blue + yr[k]! * yr[k]! + yi[k]! * yi[k]!) * share;
    inStep[k]! += rr[k]! * br[k]! + ri[k]! * bi[k]!;
    outOfStep[k]! += ri[k]! * br[k]! - rr[k]! * bi[k]!;
  }
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

/**
 * Discrete Fourier transform of a windowed square, half plane fx ≥ 0: rows then columns, by tables. Sums against cosine and sine
 * are the same for a frequency and its negative but for a sign, so that columns are gone through for half of the frequencies.
 */
function createTransform(side: number, window: Float64Array): (plane: Float64Array) => Spectrum {
  const half = side / 2 + 1;
  const wave = (of: (turn: number) => number) =>
    Float64Array.from({ length: half * side }, (_, i) =>
      of((2 * Math.PI * Math.floor(i / side) * (i % side)) / side),
    );
  const cos = wave(Math.cos);
  const sin = wave((turn) => -Math.sin(turn));
  const row = new Float64Array(side);
  // Columns one after another, as they are read next.
  const rowReal = new Float64Array(side * half);
  const rowImaginary = new Float64Array(side * half);
  return (plane) => {
    for (let y = 0; y < side; y++) {
      for (let x = 0; x < side; x++) row[x] = plane[y * side + x]! * window[x]! * window[y]!;
      for (let k = 0; k < half; k++) {
        rowReal[k * side + y] = project(row, 0, cos, k, side);
        rowImaginary[k * side + y] = project(row, 0, sin, k, side);
      }
    }
    const real = new Float64Array(side * half);
    const imaginary = new Float64Array(side * half);
    for (let k = 0; k < half; k++)
      for (let l = 0; l < half; l++) {
        const realCos = project(rowReal, k * side, cos, l, side);
        const realSin = project(rowReal, k * side, sin, l, side);
        const imaginaryCos = project(rowImaginary, k * side, cos, l, side);
        const imaginarySin = project(rowImaginary, k * side, sin, l, side);
        const opposite = ((side - l) % side) * half + k;
        real[opposite] = realCos + imaginarySin;
        imaginary[opposite] = imaginaryCos - realSin;
        real[l * half + k] = realCos - imaginarySin;
        imaginary[l * half + k] = realSin + imaginaryCos;
      }
    return { real, imaginary };
  };
}

/** Σ value · wave over `side` values from `from` on; the wave is the table's row `frequency`. */
function project(
  values: Float64Array,
  from: number,
  wave: Float64Array,
  frequency: number,
  side: number,
): number {
  const row = frequency * side;
  let sum = 0;
  for (let i = 0; i < side; i++) sum += values[from + i]! * wave[row + i]!;
  return sum;
}

function mean(values: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]!;
  return sum / values.length;
}

function meanSquare(values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]! * values[i]!;
  return sum / values.length;
}
