import { readdirSync } from 'node:fs';
import sharp from 'sharp';
import { describe, expect, test } from 'vitest';
import { linearTable } from '@/analysis/colour/srgb';
import type { Frame } from '@/analysis/image';
import { measureDark } from '@/analysis/kinds/measure-dark';
import { findHotPixels, persistentHotPixels } from '@/analysis/noise/find-hot-pixels';
import published from '@/fixtures/check-values/dark-frames.json';

const folder = 'fixtures/sensor-captures/dark-frames';

async function readFrames(milliseconds: number): Promise<Frame[]> {
  const names = readdirSync(folder)
    .filter((name) => name.includes(`_${milliseconds}ms_`))
    .sort();
  return Promise.all(
    names.map(async (name) => {
      const image = sharp(`${folder}/${name}`).toColourspace('srgb').removeAlpha();
      const { data, info } = await image.raw().toBuffer({ resolveWithObject: true });
      const table = linearTable(255);
      const grey = new Uint8Array(info.width * info.height * 3);
      grey.forEach((_, i) => {
        grey[i] = data[Math.floor(i / 3) * info.channels]!;
      });
      const { width, height } = info;
      return {
        width,
        height,
        data: grey,
        maxCode: 255,
        toLinear: [table, table, table],
        toSrgb: null,
      };
    }),
  );
}

const rows = published.rows as [string, number, number, number, number, number, number][];

// Source: reference/check-values.json, real_data_checks.dark_frames: single pixels at 5 codes and more.
describe('dark frames of a real sensor', () => {
  test.each(rows)(
    '%s at %d ms: hot pixels of 5 codes and more are those published',
    async (_, milliseconds, first, second, both) => {
      const [a, b] = (await readFrames(milliseconds)) as [Frame, Frame];
      // Two hot pixels lie side by side from 500 ms on, and neighbours count as one.
      const merged = milliseconds >= 500 ? 1 : 0;
      expect(findHotPixels(a, { least: 5 })).toHaveLength(first - merged);
      expect(findHotPixels(b, { least: 5 })).toHaveLength(second - merged);
      expect(persistentHotPixels([a, b], { least: 5 })).toHaveLength(both - merged);
    },
  );

  test('on their own threshold, nearly all persist, and there are more the longer the exposure', async () => {
    const counts: number[] = [];
    for (const [, milliseconds] of rows) {
      const frames = await readFrames(milliseconds);
      const found = frames.map((frame) => findHotPixels(frame).length);
      const lasting = persistentHotPixels(frames).length;
      // Recurrence of 80–100 % a row is what the published counts show.
      expect(lasting, `${milliseconds} ms: ${found.join(', ')}`).toBeGreaterThanOrEqual(
        0.8 * Math.min(...found),
      );
      counts.push(lasting);
    }
    expect(counts).toEqual(counts.toSorted((a, b) => a - b));
    expect(counts.at(-1)).toBeGreaterThan(20);
  });

  test('their black is cut off, and that is said', async () => {
    const [frame] = (await readFrames(25)) as [Frame];
    const { metrics, warnings } = measureDark(frame);
    expect(warnings.map(({ code }) => code)).toContain('black-clipped');
    expect(metrics.find(({ name }) => name === 'dark.level')?.value).toBeCloseTo(0.002, 3);
  });
});
