import { readFileSync, writeFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, describe, expect, test } from 'vitest';
import { toLinearSrgb } from '@/analysis/colour/frame-colour';
import { toCode, toLinear } from '@/analysis/colour/srgb';
import { decode } from '@/analysis/decode';
import { readProfile } from '@/analysis/icc';
import type { Frame } from '@/analysis/image';
import { temporaryFolder } from '../oracles/folder';
import { missing, run } from '../oracles/oracle';

const folder = temporaryFolder();
afterAll(folder.remove);

const colours: [number, number, number][] = [
  [200, 50, 250],
  [30, 160, 90],
  [128, 128, 128],
  [240, 235, 20],
  [17, 34, 51],
];
const swatch = ([r, g, b]: [number, number, number]) =>
  sharp({ create: { width: 64, height: 64, channels: 3, background: { r, g, b } } });

/** The frame's first pixel as sRGB codes 0…255, not rounded. */
function srgbCodes(frame: Frame): number[] {
  const linear = [0, 1, 2].map((i) => frame.toLinear[i]![frame.data[i]!]!);
  const srgb = toLinearSrgb(frame, linear as [number, number, number]);
  return srgb.map((value) => 255 * toCode(Math.max(0, value)));
}

describe('embedded profiles', () => {
  test.each(colours)(
    'Display P3 comes back to the sRGB it was made from: %i %i %i',
    async (r, g, b) => {
      // sharp converts sRGB to P3 by its own colour engine and rounds to 8 bits; undoing it widens that rounding up to fourfold.
      const bytes = await swatch([r, g, b]).withIccProfile('p3').png().toBuffer();
      const { frame, warnings } = await decode(bytes);
      expect(frame.toSrgb).not.toBeNull();
      expect(warnings).toEqual([]);
      srgbCodes(frame).forEach((code, i) => {
        expect(Math.abs(code - [r, g, b][i]!)).toBeLessThan(2);
      });
    },
  );

  test('an sRGB profile takes the short way: no matrix, the sRGB table itself', async () => {
    const { frame, warnings } = await decode(
      await swatch([10, 20, 30]).withIccProfile('srgb').png().toBuffer(),
    );
    expect(frame.toSrgb).toBeNull();
    expect(frame.toLinear[0][118]).toBeCloseTo(toLinear(118 / 255), 7);
    expect(warnings).toEqual([]);
  });

  test('a 16-bit file with a profile keeps both', async () => {
    const bytes = await swatch([200, 50, 250])
      .toColourspace('rgb16')
      .withIccProfile('p3')
      .png()
      .toBuffer();
    const { frame } = await decode(bytes);
    expect(frame.maxCode).toBe(65_535);
    expect(frame.toSrgb).not.toBeNull();
  });

  test('white and greys stay neutral through a matrix', async () => {
    const { frame } = await decode(
      await swatch([255, 255, 255]).withIccProfile('p3').png().toBuffer(),
    );
    const white = toLinearSrgb(frame, [1, 1, 1]);
    for (const value of white) expect(value).toBeCloseTo(1, 3);
  });

  test('a damaged profile is told and sRGB assumed', async () => {
    const bytes = await swatch([1, 2, 3])
      .withIccProfile('p3')
      .tiff({ compression: 'none' })
      .toBuffer();
    const at = bytes.indexOf('acsp');
    bytes.write('????', at, 'latin1');
    const { frame, warnings } = await decode(bytes);
    expect(warnings.map((w) => w.code)).toEqual(['profile-unreadable']);
    expect(frame.toSrgb).toBeNull();
  });

  test('every cut of a profile is read without a crash', async () => {
    const { icc } = await sharp(
      await swatch([1, 2, 3]).withIccProfile('p3').png().toBuffer(),
    ).metadata();
    const readings = Array.from(
      { length: icc!.length },
      (_, n) => readProfile(icc!.subarray(0, n), 255).kind,
    );
    expect(new Set(readings)).toEqual(new Set(['unreadable']));
    expect(readProfile(icc!, 255).kind).toBe('matrix');
  });
});

/** A v2 profile written from its published layout (ICC.1): three primaries, one curve for all. */
function profile(columns: number[][], curve: Buffer): Buffer {
  const header = Buffer.alloc(128);
  header.write('mntrRGB XYZ ', 12, 'latin1');
  header.write('acsp', 36, 'latin1');
  const xyz = columns.map((column) => {
    const tag = Buffer.alloc(20);
    tag.write('XYZ ', 0, 'latin1');
    column.forEach((value, i) => {
      tag.writeInt32BE(Math.round(value * 65_536), 8 + 4 * i);
    });
    return tag;
  });
  const parts = [...xyz, curve, curve, curve];
  const table = Buffer.alloc(4 + 12 * parts.length);
  table.writeUInt32BE(parts.length, 0);
  let offset = 128 + table.length;
  ['rXYZ', 'gXYZ', 'bXYZ', 'rTRC', 'gTRC', 'bTRC'].forEach((name, i) => {
    table.write(name, 4 + 12 * i, 'latin1');
    table.writeUInt32BE(offset, 8 + 12 * i);
    table.writeUInt32BE(parts[i]!.length, 12 + 12 * i);
    offset += parts[i]!.length;
  });
  return Buffer.concat([header, table, ...parts]);
}

function parametric(kind: number, ...values: number[]): Buffer {
  const tag = Buffer.alloc(12 + 4 * values.length);
  tag.write('para', 0, 'latin1');
  tag.writeUInt16BE(kind, 8);
  values.forEach((value, i) => {
    tag.writeInt32BE(Math.round(value * 65_536), 12 + 4 * i);
  });
  return tag;
}

function sampled(...values: number[]): Buffer {
  const tag = Buffer.alloc(12 + 2 * values.length);
  tag.write('curv', 0, 'latin1');
  tag.writeUInt32BE(values.length, 8);
  values.forEach((value, i) => {
    tag.writeUInt16BE(value, 12 + 2 * i);
  });
  return tag;
}

describe('curves of ICC.1', () => {
  // sRGB's own primaries adapted to D50, so that only the curve differs.
  const primaries = [
    [0.43607, 0.22249, 0.01392],
    [0.38515, 0.71687, 0.09708],
    [0.14307, 0.06061, 0.7141],
  ];
  const tableOf = (curve: Buffer) => {
    const reading = readProfile(profile(primaries, curve), 255);
    if (reading.kind !== 'matrix') throw new Error(reading.kind);
    expect(reading.space.toSrgb).toBeNull();
    return reading.space.toLinear[0];
  };
  const half = 128 / 255;

  test.each([
    ['identity', sampled(), half],
    ['one gamma, 8.8 fixed', sampled(0x0240), half ** 2.25],
    [
      'three samples, straight between',
      sampled(0, 10_000, 65_535),
      (10_000 + (2 * half - 1) * 55_535) / 65_535,
    ],
    ['parametric 0', parametric(0, 1.8), half ** 1.8],
    ['parametric 1', parametric(1, 2, 0.9, 0.1), (0.9 * half + 0.1) ** 2],
    ['parametric 2', parametric(2, 2, 0.9, 0.05, 0.04), (0.9 * half + 0.05) ** 2 + 0.04],
    [
      'parametric 3, sRGB’s own',
      parametric(3, 2.4, 1 / 1.055, 0.055 / 1.055, 1 / 12.92, 0.04045),
      toLinear(half),
    ],
    [
      'parametric 4',
      parametric(4, 2, 0.9, 0.05, 0.5, 0.2, 0.01, 0.02),
      (0.9 * half + 0.05) ** 2 + 0.01,
    ],
  ])('%s', (_, curve, expected) => {
    expect(tableOf(curve)[128]).toBeCloseTo(expected, 4);
  });

  test('below its break the parametric curve is straight', () => {
    const table = tableOf(parametric(4, 2, 0.9, 0.05, 0.5, 0.2, 0.01, 0.02));
    expect(table[25]).toBeCloseTo(0.5 * (25 / 255) + 0.02, 4);
  });

  test('primaries wider than sRGB’s give a matrix', () => {
    // Adobe RGB (1998) primaries adapted to D50 (published encoding; values from memory).
    const adobe = [
      [0.60974, 0.31111, 0.01947],
      [0.20528, 0.62567, 0.06087],
      [0.14919, 0.06322, 0.74457],
    ];
    const reading = readProfile(profile(adobe, sampled(0x0233)), 255);
    if (reading.kind !== 'matrix') throw new Error(reading.kind);
    // Linear Adobe red and green in linear sRGB, as every conversion table between the two has it: 1.398, −0.398.
    expect(reading.space.toSrgb?.[0]).toBeCloseTo(1.3984, 2);
    expect(reading.space.toSrgb?.[1]).toBeCloseTo(-0.3984, 2);
  });
});

describe('files without a profile (CIPA DC-008)', () => {
  const withTags = async (name: string, ...tags: string[]) => {
    const file = folder.path(`${name}.jpg`);
    await swatch([200, 50, 120]).jpeg({ quality: 100, chromaSubsampling: '4:4:4' }).toFile(file);
    if (tags.length > 0) run('exiftool', ['-q', '-overwrite_original', ...tags, file]);
    return decode(readFileSync(file));
  };

  test('nothing said: sRGB, and a warning', async () => {
    const { frame, warnings } = await decode(await swatch([1, 2, 3]).png().toBuffer());
    expect(frame.toSrgb).toBeNull();
    expect(warnings.map((w) => w.code)).toEqual(['colour-space-assumed']);
  });

  test.skipIf(missing('exiftool'))('ColorSpace 1 is sRGB, without a warning', async () => {
    const { frame, warnings } = await withTags('srgb', '-ColorSpace#=1');
    expect(frame.toSrgb).toBeNull();
    expect(warnings).toEqual([]);
  });

  test.skipIf(missing('exiftool'))(
    'uncalibrated with interoperability R03 is Adobe RGB',
    async () => {
      const { frame, warnings } = await withTags(
        'adobe',
        '-ColorSpace#=65535',
        '-InteropIndex#=R03',
      );
      expect(frame.toSrgb?.[0]).toBeCloseTo(1.3984, 2);
      expect(frame.toLinear[0][128]).toBeCloseTo((128 / 255) ** 2.19921875, 6);
      expect(warnings).toEqual([]);
    },
  );

  test.skipIf(missing('exiftool'))(
    'uncalibrated without it is taken for sRGB, with a warning',
    async () => {
      const { frame, warnings } = await withTags('uncalibrated', '-ColorSpace#=65535');
      expect(frame.toSrgb).toBeNull();
      expect(warnings.map((w) => w.code)).toEqual(['colour-space-assumed']);
    },
  );
});

test.skipIf(missing('imagemagick'))(
  'agrees with ImageMagick’s colour engine on stored P3 codes',
  async () => {
    const profileOf = async (name: string) => {
      const tagged = await swatch([0, 0, 0]).withIccProfile(name).png().toBuffer();
      writeFileSync(folder.path(`${name}.icc`), (await sharp(tagged).metadata()).icc!);
      return folder.path(`${name}.icc`);
    };
    const [p3, srgb] = [await profileOf('p3'), await profileOf('srgb')];
    for (const colour of colours) {
      const file = folder.path('p3.png');
      await swatch(colour).withIccProfile('p3').png().toFile(file);
      const format = ['r', 'g', 'b'].map((c) => `%[fx:255*p{3,3}.${c}]`).join(' ');
      const conversion = ['-profile', p3, '-profile', srgb, '-depth', '16'];
      const text = run('convert', [file, ...conversion, '-format', format, 'info:']);
      const { frame } = await decode(readFileSync(file));
      srgbCodes(frame).forEach((code, i) => {
        expect(Math.abs(code - Number(text.split(' ')[i]))).toBeLessThan(0.6);
      });
    }
  },
);
