import { expect, test } from 'vitest';
import { toLinear } from '@/analysis/colour/srgb';
import { measureClipping, measureMedian } from '@/analysis/exposure/measure-exposure';
import { measureFrame } from '@/analysis/exposure/measure-frame';
import { srgbSpace } from '@/analysis/icc';
import type { Frame } from '@/analysis/image';

function frameOf(width: number, height: number, codes: ArrayLike<number>, maxCode = 255): Frame {
  const data = maxCode === 255 ? Uint8Array.from(codes) : Uint16Array.from(codes);
  return { width, height, data, maxCode, ...srgbSpace(maxCode) };
}

/** A plain counting loop, written from the definition. */
function countByDefinition({ data, maxCode }: Frame): [number, number] {
  const step = maxCode / 255;
  let [high, low, pixels] = [0, 0, 0];
  for (let i = 0; i < data.length; i += 3) {
    const rgb = [data[i]! / step, data[i + 1]! / step, data[i + 2]! / step];
    pixels++;
    if (rgb.some((code) => code >= 254)) high++;
    if (rgb.every((code) => code <= 1)) low++;
  }
  return [(100 * high) / pixels, (100 * low) / pixels];
}

test.each([
  [255, 61, 53],
  [255, 64, 48],
  [65_535, 33, 31],
])(
  'clipping counts every pixel as its definition says (full scale %i, %i × %i)',
  (maxCode, width, height) => {
    // Codes crowd round both ends, so that every mixture of channels at and beside the limits comes up.
    const near = [0, 1, 2, 3, 126, 127, 128, 129, 252, 253, 254, 255].map(
      (c) => (c * maxCode) / 255,
    );
    let state = 7;
    const codes = Array.from({ length: width * height * 3 }, (_, i) => {
      state = (state * 1_103_515_245 + 12_345) % 2_147_483_648;
      // Some whole pixels are black.
      return Math.floor(i / 3) % 5 === 0 ? near[state % 2]! : near[(state >> 8) % near.length]!;
    });
    const frame = frameOf(width, height, codes, maxCode);
    const { clippedHighlights, clippedShadows } = measureFrame(frame);
    const [high, low] = countByDefinition(frame);
    expect(low).toBeGreaterThan(10);
    expect(clippedHighlights).toBeCloseTo(high, 9);
    expect(clippedShadows).toBeCloseTo(low, 9);
  },
);

test('a frame of one grey has that grey’s luminance as its median, in stops against 18 %', () => {
  for (const code of [20, 60, 118, 200]) {
    const frame = frameOf(64, 64, new Uint8Array(64 * 64 * 3).fill(code));
    const { value, unit } = measureMedian(measureFrame(frame), null);
    expect(unit).toBe('EV');
    expect(value).toBeCloseTo(Math.log2(toLinear(code / 255) / 0.18), 1);
    expect(Math.abs(value - Math.log2(toLinear(code / 255) / 0.18))).toBeLessThan(0.01);
  }
});

test('the median is not drawn by a bright minority', () => {
  const codes = Array.from({ length: 90 * 90 }, (_, i) => (i % 90 < 40 ? 250 : 100)).flatMap(
    (c) => [c, c, c],
  );
  const median = measureFrame(frameOf(90, 90, codes)).median;
  expect(median).toBeCloseTo(toLinear(100 / 255), 3);
});

test('a black frame has a finite median', () => {
  const frame = frameOf(64, 64, new Uint8Array(64 * 64 * 3));
  const { value, uncertainty } = measureMedian(measureFrame(frame), null);
  expect(Number.isFinite(value) && Number.isFinite(uncertainty)).toBe(true);
  const [highlights, shadows] = measureClipping(measureFrame(frame));
  expect(highlights?.value).toBe(0);
  expect(shadows?.value).toBe(100);
});

test('histograms hold shares that add to one, in the right bin', () => {
  const frame = frameOf(64, 64, new Uint8Array(64 * 64 * 3).fill(118));
  const { histogram, histogramByChannel } = measureFrame(frame);
  expect(histogram).toHaveLength(64);
  for (const shares of [histogram, ...Object.values(histogramByChannel)]) {
    expect(shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 9);
    expect(shares[Math.floor((118 / 255) * 64)]).toBeCloseTo(1, 9);
  }
});
