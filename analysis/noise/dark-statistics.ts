import type { Frame } from '../image.ts';

/** Side of the tiles, px: large beside a hot pixel's smear, small beside glow from a warm corner. */
export const tile = 64;
/**
 * What is left of the variance of 64 normal numbers without the largest of them. From a simulation of 200,000 sets.
 */
const withoutLargest = 0.923;
/** Median over mean of χ² with 62 degrees of freedom: (1 − 2/(9 · 62))³ (Wilson & Hilferty). */
const medianOverMean = (1 - 2 / (9 * 62)) ** 3;

/** Sums over the frame of s = R + G + B, in codes as stored. */
export interface DarkStatistics {
  readonly columns: number;
  readonly rows: number;
  /** Mean and standard deviation of s in each tile, row-major; hot pixels hardly count. */
  readonly mean: Float64Array;
  readonly deviation: Float64Array;
  /** Means of s over the frame's rows and columns. */
  readonly rowMean: Float64Array;
  readonly columnMean: Float64Array;
  /** Row and column offsets of s beyond the noise, as a variance each, and the standard uncertainty of their sum. */
  readonly rowVariance: number;
  readonly columnVariance: number;
  readonly bandingUncertainty: number;
}

/** One look at every pixel of a dark frame. Frames smaller than two tiles a side are taken as one tile high or wide. */
export function gatherDark(frame: Frame): DarkStatistics {
  const { width, height } = frame;
  const columns = Math.max(1, Math.floor(width / tile));
  const rows = Math.max(1, Math.floor(height / tile));
  const across = { size: Math.min(tile, width), count: columns };
  const down = { size: Math.min(tile, height), count: rows };
  // Means of s over row pieces (one entry a row and tile) and column pieces (one a tile and column).
  const rowPieces = new Float32Array(rows * down.size * columns);
  const columnPieces = new Float32Array(rows * columns * across.size);
  const mean = new Float64Array(rows * columns);
  const deviation = new Float64Array(rows * columns);
  const rowMean = new Float64Array(height);
  const columnMean = new Float64Array(width);
  const spreads = new Float32Array(down.size * columns);
  const line = new Uint32Array(width);
  const strip = new Float64Array(width);
  for (let y = 0; y < height; y++) {
    readSums(frame, y, line);
    let total = 0;
    for (let x = 0; x < width; x++) {
      const s = line[x]!;
      total += s;
      strip[x]! += s;
    }
    rowMean[y] = total / width;
    const tileRow = Math.min(rows - 1, Math.floor(y / down.size));
    const within = y - tileRow * down.size;
    if (within < down.size) {
      for (let col = 0; col < columns; col++) {
        const piece = measurePiece(line, col * across.size, across.size);
        rowPieces[y * columns + col] = piece.mean;
        spreads[col * down.size + within] = piece.variance;
        mean[tileRow * columns + col]! += piece.mean / down.size;
      }
    }
    const last = within === down.size - 1;
    if (last) {
      for (let col = 0; col < columns; col++) {
        const sorted = spreads
          .subarray(col * down.size, (col + 1) * down.size)
          .slice()
          .sort();
        const variance = sorted[sorted.length >> 1]! / withoutLargest / medianOverMean;
        deviation[tileRow * columns + col] = Math.sqrt(variance);
      }
      for (let x = 0; x < columns * across.size; x++)
        columnPieces[tileRow * columns * across.size + x] = strip[x]! / down.size;
    }
    if (last || y === height - 1)
      for (let x = 0; x < width; x++) {
        columnMean[x]! += strip[x]! / height;
        strip[x] = 0;
      }
  }
  const byRow = bandingOf(rowPieces, down, columns, (line_, piece) => line_ * columns + piece);
  const length = columns * across.size;
  const byColumn = bandingOf(columnPieces, across, rows, (line_, piece) => piece * length + line_);
  return {
    columns,
    rows,
    mean,
    deviation,
    rowMean,
    columnMean,
    rowVariance: byRow.variance,
    columnVariance: byColumn.variance,
    bandingUncertainty: Math.hypot(byRow.uncertainty, byColumn.uncertainty),
  };
}

function readSums({ data, width }: Frame, y: number, out: Uint32Array): void {
  let at = y * width * 3;
  for (let x = 0; x < width; x++, at += 3) out[x] = data[at]! + data[at + 1]! + data[at + 2]!;
}

/** Mean and variance of a piece of a row without its largest value, which may be a hot pixel. */
function measurePiece(
  line: Uint32Array,
  start: number,
  size: number,
): { mean: number; variance: number } {
  let sum = 0;
  let squares = 0;
  let largest = 0;
  for (let i = start; i < start + size; i++) {
    const s = line[i]!;
    sum += s;
    squares += s * s;
    if (s > largest) largest = s;
  }
  const n = size - 1;
  sum -= largest;
  squares -= largest * largest;
  return { mean: sum / n, variance: Math.max(0, (squares - (sum * sum) / n) / (n - 1)) };
}

/**
 * Variance of whole lines beyond what noise explains, by analysis of variance within each band of tiles: lines by pieces, the
 * pieces' own levels and the band's slope taken out, so that glow that changes slowly isn't banding. The noise is that of the pieces' means, so that
 * noise that is alike from pixel to pixel (JPEG, demosaicing) counts for what it is.
 */
function bandingOf(
  pieces: Float32Array,
  band: { size: number; count: number },
  count: number,
  at: (line: number, piece: number) => number,
): { variance: number; uncertainty: number } {
  if (count < 2) return { variance: 0, uncertainty: 0 };
  const { size } = band;
  let sum = 0;
  let error = 0;
  for (let b = 0; b < band.count; b++) {
    const level = new Float64Array(count);
    const effect = new Float64Array(size);
    for (let i = 0; i < size; i++)
      for (let j = 0; j < count; j++) {
        const value = pieces[at(b * size + i, j)]!;
        level[j]! += value / size;
        effect[i]! += value / count;
      }
    const middle = level.reduce((s, v) => s + v, 0) / count;
    const slope = slopeOf(effect);
    let lines = 0;
    let rest = 0;
    for (let i = 0; i < size; i++) {
      lines += (effect[i]! - middle - slope * (i - (size - 1) / 2)) ** 2;
      for (let j = 0; j < count; j++)
        rest += (pieces[at(b * size + i, j)]! - level[j]! - effect[i]! + middle) ** 2;
    }
    sum += lines / (size - 2);
    error += rest / (size - 1) / (count - 1) / count;
  }
  const total = sum / band.count;
  const explained = error / band.count;
  return {
    variance: Math.max(0, total - explained),
    uncertainty: total * Math.sqrt(2 / (band.count * (size - 1))),
  };
}

/** Least squares slope of values at 0, 1, 2 … */
function slopeOf(values: Float64Array): number {
  const middle = (values.length - 1) / 2;
  let [moment, squares] = [0, 0];
  for (let i = 0; i < values.length; i++) {
    moment += (i - middle) * values[i]!;
    squares += (i - middle) ** 2;
  }
  return moment / squares;
}
