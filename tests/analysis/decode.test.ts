import { readFileSync, writeFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, describe, expect, test } from 'vitest';
import { decode } from '@/analysis/decode';
import { MeasurementError } from '@/analysis/errors';
import type { Frame } from '@/analysis/image';
import { temporaryFolder } from '../oracles/folder';
import { missing, run } from '../oracles/oracle';

const folder = temporaryFolder();
afterAll(folder.remove);

const width = 96;
const height = 64;

/** A picture whose every pixel tells its place: red across, green down, blue by quarter. */
function gradient(): Buffer {
  const data = Buffer.alloc(width * height * 3);
  for (let row = 0; row < height; row++) {
    for (let col = 0; col < width; col++) {
      data.set([col * 2, row * 3, col < 48 ? 40 : 200], (row * width + col) * 3);
    }
  }
  return data;
}
const picture = () => sharp(gradient(), { raw: { width, height, channels: 3 } });
const pixel = ({ data, width: w }: Frame, col: number, row: number) =>
  Array.from(data.subarray((row * w + col) * 3, (row * w + col) * 3 + 3));

async function refusal(bytes: Uint8Array): Promise<MeasurementError> {
  const outcome = await decode(bytes).catch((error: unknown) => error);
  expect(outcome).toBeInstanceOf(MeasurementError);
  return outcome as MeasurementError;
}

describe('formats', () => {
  test.each(['png', 'tiff', 'webp'] as const)(
    'lossless %s gives the codes as stored',
    async (format) => {
      const options = { webp: { lossless: true }, tiff: { compression: 'lzw' }, png: {} }[format];
      const bytes = await picture().toFormat(format, options).toBuffer();
      const decoded = await decode(bytes);
      expect(decoded.format).toBe(format);
      expect(decoded.bytes).toBe(bytes.length);
      expect(decoded.frame).toMatchObject({ width, height, maxCode: 255, toSrgb: null });
      expect(Buffer.from(decoded.frame.data).equals(gradient())).toBe(true);
    },
  );

  test.each(['jpeg', 'avif'] as const)('%s comes within its own loss', async (format) => {
    const bytes = await picture()
      .toFormat(format, { quality: 95, chromaSubsampling: '4:4:4' })
      .toBuffer();
    const { frame, format: told } = await decode(bytes);
    expect(told).toBe(format);
    const [red, green, blue] = pixel(frame, 20, 30);
    expect(Math.abs(red! - 40)).toBeLessThanOrEqual(4);
    expect(Math.abs(green! - 90)).toBeLessThanOrEqual(4);
    expect(Math.abs(blue! - 40)).toBeLessThanOrEqual(6);
  });

  test.each(['png', 'tiff'] as const)('16-bit %s keeps its depth', async (format) => {
    const codes = Uint16Array.from({ length: width * height * 3 }, (_, i) => (i * 31) % 65_536);
    const bytes = await sharp(codes, { raw: { width, height, channels: 3 } })
      .toColourspace('rgb16')
      .toFormat(format, format === 'tiff' ? { compression: 'lzw' } : {})
      .toBuffer();
    const { frame } = await decode(bytes);
    expect(frame.maxCode).toBe(65_535);
    expect(frame.data).toBeInstanceOf(Uint16Array);
    expect(Array.from(frame.data.subarray(0, 3000))).toEqual(Array.from(codes.subarray(0, 3000)));
    expect(frame.toLinear[0].length).toBe(65_536);
  });

  test('10-bit AVIF fills the 16-bit range', async () => {
    const white = sharp({ create: { width, height, channels: 3, background: '#ffffff' } });
    const file = folder.path('white.png');
    await white.png().toFile(file);
    const bytes = await sharp(file).avif({ lossless: true }).toBuffer();
    const { frame } = await decode(bytes);
    expect(pixel(frame, 5, 5)).toEqual([frame.maxCode, frame.maxCode, frame.maxCode]);
  });

  test('transparency is dropped and told', async () => {
    const { frame, warnings } = await decode(await picture().ensureAlpha(0.5).png().toBuffer());
    expect(pixel(frame, 20, 30)).toEqual([40, 90, 40]);
    expect(warnings.map((w) => w.code)).toContain('transparency-ignored');
  });
});

/** Where the pixel shown at (3, 5) of the upright picture is stored, for each Exif Orientation (CIPA DC-008 table of the tag). */
const stored: Record<number, (w: number, h: number) => [number, number]> = {
  1: () => [3, 5],
  2: (w) => [w - 1 - 3, 5],
  3: (w, h) => [w - 1 - 3, h - 1 - 5],
  4: (_, h) => [3, h - 1 - 5],
  5: () => [5, 3],
  6: (_, h) => [5, h - 1 - 3],
  7: (w, h) => [w - 1 - 5, h - 1 - 3],
  8: (w) => [w - 1 - 5, 3],
};

test.each([1, 2, 3, 4, 5, 6, 7, 8])('orientation %i is turned upright', async (orientation) => {
  const bytes = await picture().withMetadata({ orientation }).png().toBuffer();
  const { frame } = await decode(bytes);
  const turned = orientation > 4;
  expect([frame.width, frame.height]).toEqual(turned ? [height, width] : [width, height]);
  const [col, row] = stored[orientation]!(width, height);
  expect(pixel(frame, 3, 5)).toEqual([col * 2, row * 3, col < 48 ? 40 : 200]);
});

describe('refusals', () => {
  const two = async () => {
    const other = await picture().negate().png().toBuffer();
    return sharp([await picture().png().toBuffer(), other], { join: { animated: true } });
  };

  test.each([
    ['nothing', 'empty-file', () => new Uint8Array(0)],
    ['text', 'unsupported-format', () => Buffer.from('not a picture at all')],
    ['SVG', 'unsupported-format', () => Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>')],
    ['GIF', 'unsupported-format', () => picture().gif().toBuffer()],
    ['BMP', 'unsupported-format', () => Buffer.from('BM and what follows')],
    ['a CMYK JPEG', 'cmyk', () => picture().toColourspace('cmyk').jpeg().toBuffer()],
    ['a grey JPEG', 'no-colour', () => picture().toColourspace('b-w').jpeg().toBuffer()],
    ['a grey PNG', 'no-colour', () => picture().toColourspace('b-w').png().toBuffer()],
    [
      'a cut-off JPEG',
      'damaged-file',
      async () => (await picture().jpeg({ quality: 98 }).toBuffer()).subarray(0, 1000),
    ],
    [
      'a cut-off PNG',
      'damaged-file',
      async () => (await picture().png().toBuffer()).subarray(0, 400),
    ],
    ['a JPEG header alone', 'damaged-file', () => Buffer.from([0xff, 0xd8, 0xff, 0xe0, 0, 16])],
    ['an animated WebP', 'animated', async () => (await two()).webp().toBuffer()],
    ['a TIFF of two pages', 'several-pages', async () => (await two()).tiff().toBuffer()],
    [
      'a TIFF in CIELAB',
      'unsupported-depth',
      () => picture().toColourspace('lab').tiff({ compression: 'lzw' }).toBuffer(),
    ],
    ['a stamp', 'too-small', () => picture().resize(40, 40).png().toBuffer()],
    [
      'a poster',
      'too-large',
      () =>
        sharp({ create: { width: 20_000, height: 6100, channels: 3, background: '#777' } })
          .png({ compressionLevel: 1 })
          .toBuffer(),
    ],
  ] as [string, string, () => Uint8Array | Promise<Uint8Array>][])(
    '%s is refused as %s',
    async (_, code, make) => {
      const error = await refusal(await make());
      expect(error.code).toBe(code);
      // What was found, and what to do.
      expect(error.message).toMatch(/^[A-Z].*\. ?.*\.$/);
      expect(error.message).toMatch(/Use|Copy|Set|Save|Choose/);
    },
  );

  test.skipIf(missing('exiftool'))(
    'a camera’s raw file, TIFF inside, is refused and not measured by its thumbnail',
    async () => {
      const file = folder.path('raw.tiff');
      writeFileSync(file, await picture().tiff().toBuffer());
      run('exiftool', ['-q', '-overwrite_original', '-DNGVersion=1.4.0.0', file]);
      expect((await refusal(readFileSync(file))).code).toBe('raw-file');
    },
  );

  test('damage in the middle of a JPEG is noticed', async () => {
    const bytes = await picture().jpeg({ quality: 98 }).toBuffer();
    bytes.fill(0xff, bytes.length >> 1, (bytes.length >> 1) + 60);
    expect((await refusal(bytes)).code).toBe('damaged-file');
  });
});
