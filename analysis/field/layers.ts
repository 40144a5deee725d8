import type { Frame, Plane } from '../image.ts';
import { solveSpd } from '../numeric/spd.ts';

/** The frame made small, in codes 0…1 of full scale: (R + 2 G + B) / 4, near luminance and quick to add up. */
export interface Layer extends Plane {
  /** Image pixels that a pixel of the layer spans. */
  readonly factor: number;
}

/** Longest side of the first layer at most: a speck's shadow spans several of its pixels at any aperture. */
const longest = 1400;

/** Every pixel counts: the mean's noise is what limits the faintest spot that can be found. */
export function reduceCodes(frame: Frame): Layer {
  const factor = Math.max(1, Math.ceil(Math.max(frame.width, frame.height) / longest));
  const width = Math.floor(frame.width / factor);
  const height = Math.floor(frame.height / factor);
  const out = new Float32Array(width * height);
  const scale = 1 / (4 * factor * factor * frame.maxCode);
  const codes = frame.data;
  for (let row = 0; row < height; row++) {
    const line = out.subarray(row * width, (row + 1) * width);
    for (let k = 0; k < factor; k++) {
      let at = (row * factor + k) * frame.width * 3;
      for (let col = 0; col < width; col++) {
        let sum = 0;
        for (let j = 0; j < factor; j++, at += 3)
          sum += codes[at]! + 2 * codes[at + 1]! + codes[at + 2]!;
        line[col]! += sum;
      }
    }
    for (let col = 0; col < width; col++) line[col]! *= scale;
  }
  return { width, height, data: out, factor };
}

/** Powers of x and y in a surface of fourth degree: a lens's fall of light about any centre, and a tilt. */
const powers = [0, 1, 2, 3, 4].flatMap((i) =>
  [0, 1, 2, 3, 4].filter((j) => i + j <= 4).map((j) => [i, j] as const),
);

/** Takes a smooth surface from a layer, so that a slope isn't bent where the frame's edge cuts it off. In place. */
export function levelOut(layer: Layer): Layer {
  const { width, height, data } = layer;
  const terms = powers.length;
  const normal = new Float64Array(terms * terms);
  const right = new Float64Array(terms);
  const bases = (at: number, size: number) => {
    const x = (2 * (at + 0.5)) / size - 1;
    return [1, x, x * x, x ** 3, x ** 4];
  };
  const across = Array.from({ length: width }, (_, col) => bases(col, width));
  const step = Math.max(1, Math.floor(Math.sqrt((width * height) / 20_000)));
  const row = new Float64Array(terms);
  for (let y = step >> 1; y < height; y += step) {
    const down = bases(y, height);
    for (let x = step >> 1; x < width; x += step) {
      powers.forEach(([i, j], k) => {
        row[k] = across[x]![i]! * down[j]!;
      });
      const value = data[y * width + x]!;
      for (let j = 0; j < terms; j++) {
        right[j]! += row[j]! * value;
        for (let k = 0; k <= j; k++) normal[j * terms + k]! += row[j]! * row[k]!;
      }
    }
  }
  if (!solveSpd(normal, right)) return layer;
  for (let y = 0; y < height; y++) {
    const down = bases(y, height);
    const along = [0, 0, 0, 0, 0];
    powers.forEach(([i, j], k) => {
      along[i]! += right[k]! * down[j]!;
    });
    const [a, b, c, d, e] = along as [number, number, number, number, number];
    for (let col = 0; col < width; col++) {
      const x = across[col]![1]!;
      data[y * width + col]! -= a + x * (b + x * (c + x * (d + x * e)));
    }
  }
  return layer;
}

export function halve(layer: Layer): Layer {
  const width = layer.width >> 1;
  const height = layer.height >> 1;
  const data = new Float32Array(width * height);
  for (let row = 0; row < height; row++)
    for (let col = 0; col < width; col++) {
      const at = 2 * row * layer.width + 2 * col;
      const above = layer.data[at]! + layer.data[at + 1]!;
      const below = layer.data[at + layer.width]! + layer.data[at + layer.width + 1]!;
      data[row * width + col] = (above + below) / 4;
    }
  return { width, height, data, factor: layer.factor * 2 };
}

/**
 * Gaussian blur of standard deviation sigma, a pixel or two, the frame's edge mirrored: a mean there has no pixel counted
 * for more than twice.
 */
export function blurGaussian(
  { width, height }: Plane,
  data: Float32Array,
  sigma: number,
): Float32Array {
  const reach = Math.ceil(3 * sigma);
  const kernel = Float32Array.from({ length: reach + 1 }, (_, i) =>
    Math.exp((-i * i) / (2 * sigma * sigma)),
  );
  const total = kernel.reduce((sum, v) => sum + v, 0) * 2 - kernel[0]!;
  for (let i = 0; i <= reach; i++) kernel[i]! /= total;
  const across = new Float32Array(data.length);
  const padded = new Float32Array(width + 2 * reach);
  for (let row = 0; row < height; row++) {
    const start = row * width;
    padded.set(data.subarray(start, start + width), reach);
    for (let i = 0; i < reach; i++) {
      padded[reach - 1 - i] = data[start + Math.min(i, width - 1)]!;
      padded[reach + width + i] = data[start + Math.max(width - 1 - i, 0)]!;
    }
    for (let col = 0; col < width; col++) {
      let sum = kernel[0]! * padded[col + reach]!;
      for (let k = 1; k <= reach; k++)
        sum += kernel[k]! * (padded[col + reach - k]! + padded[col + reach + k]!);
      across[start + col] = sum;
    }
  }
  const out = new Float32Array(data.length);
  const mirror = (row: number) => {
    const inside = row < 0 ? -1 - row : row >= height ? 2 * height - 1 - row : row;
    return Math.min(height - 1, Math.max(0, inside)) * width;
  };
  for (let row = 0; row < height; row++) {
    const line = out.subarray(row * width, (row + 1) * width);
    for (let k = -reach; k <= reach; k++) {
      const weight = kernel[Math.abs(k)]!;
      const start = mirror(row + k);
      for (let col = 0; col < width; col++) line[col]! += weight * across[start + col]!;
    }
  }
  return out;
}
