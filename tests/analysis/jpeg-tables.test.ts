import sharp from 'sharp';
import { expect, test } from 'vitest';
import { readBlockStep } from '@/analysis/jpeg-tables';

const jpeg = (quality: number, progressive = false) =>
  sharp({ create: { width: 64, height: 64, channels: 3, background: '#777' } })
    .jpeg({ quality, progressive })
    .toBuffer();

// ITU-T T.81, tables K.1 and K.2, begin with 16 and 17; encoders take them unscaled at quality 50, and all ones at 100.
test.each([
  [50, 16 / 8, 17 / 8],
  [100, 1 / 8, 1 / 8],
])('quality %i rounds block means to luma %f and chroma %f', async (quality, luma, chroma) => {
  expect(readBlockStep(await jpeg(quality))).toEqual({ luma, chroma });
  expect(readBlockStep(await jpeg(quality, true))).toEqual({ luma, chroma });
});

test('no tables, no answer', () => {
  expect(readBlockStep(Uint8Array.of(0xff, 0xd8, 0xff, 0xd9))).toBeNull();
  expect(readBlockStep(new Uint8Array(0))).toBeNull();
});
