import { readFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, describe, expect, test } from 'vitest';
import { readCapture } from '@/analysis/capture';
import { decode } from '@/analysis/decode';
import { temporaryFolder } from '../oracles/folder';
import { missing, run } from '../oracles/oracle';

const folder = temporaryFolder();
afterAll(folder.remove);

const blank = () => sharp({ create: { width: 64, height: 64, channels: 3, background: '#777' } });
const nothing = {
  make: null,
  model: null,
  serial: null,
  exposureTime: null,
  fNumber: null,
  iso: null,
  exposureBias: null,
  focalLength: null,
  takenAt: null,
  program: null,
  flash: null,
  software: null,
};

describe.skipIf(missing('exiftool'))('tags written by exiftool are read', () => {
  const tags = {
    Make: 'Aster',
    Model: 'A-40',
    Software: 'Ver.1.02',
    SerialNumber: '00123456',
    ExposureTime: '1/125',
    FNumber: '5.6',
    ISO: '200',
    ExposureCompensation: '-2/3',
    FocalLength: '35',
    DateTimeOriginal: '2026:03:14 10:22:31',
    SubSecTimeOriginal: '47',
    'ExposureProgram#': '3',
    'Flash#': '1',
  };
  const expected = {
    make: 'Aster',
    model: 'A-40',
    software: 'Ver.1.02',
    serial: '00123456',
    exposureTime: 1 / 125,
    fNumber: 5.6,
    iso: 200,
    focalLength: 35,
    takenAt: '2026-03-14T10:22:31.470',
    program: 'aperture-priority',
    flash: true,
  };

  test.each(['jpg', 'png', 'tiff', 'webp', 'avif'])('from %s', async (ending) => {
    const file = folder.path(`tags.${ending}`);
    await blank().toFile(file);
    const args = Object.entries(tags).map(([name, value]) => `-EXIF:${name}=${value}`);
    run('exiftool', ['-q', '-overwrite_original', ...args, file]);
    const { capture } = await decode(readFileSync(file));
    const { exposureBias, ...rest } = capture;
    expect(rest).toEqual(expected);
    expect(exposureBias).toBeCloseTo(-2 / 3, 6);
  });
});

test('a file without Exif says nothing', async () => {
  const { capture } = await decode(await blank().png().toBuffer());
  expect(capture).toEqual(nothing);
});

describe('damaged and absurd values count as absent (CIPA DC-008: a denominator may be zero)', () => {
  test.each([
    ['0/0 exposure time', { exif: { 33434: Number.NaN } }],
    ['1/0 exposure time', { exif: { 33434: Number.POSITIVE_INFINITY } }],
    ['negative exposure time', { exif: { 33434: -0.01 } }],
    ['aperture zero', { exif: { 33437: 0 } }],
    ['focal length zero', { exif: { 37386: 0 } }],
    ['sensitivity zero', { exif: { 34855: 0 } }],
    ['compensation of 400 stops', { exif: { 37380: 400 } }],
    ['the thirtieth of February', { exif: { 36867: '2026:02:30 10:00:00' } }],
    ['hour 25', { exif: { 36867: '2026:02:03 25:00:00' } }],
    ['a date of blanks', { exif: { 36867: '    :  :     :  :  ' } }],
    ['zeros for a date', { exif: { 36867: '0000:00:00 00:00:00' } }],
    ['text for a number', { exif: { 33437: 'five' } }],
    ['a number for text', { ifd0: { 271: 7 } }],
    ['an empty maker', { ifd0: { 271: '  \0\0' } }],
    ['program 0, not defined', { exif: { 34850: 0 } }],
    ['program 77', { exif: { 34850: 77 } }],
  ])('%s', (_, tags) => {
    expect(readCapture(tags)).toEqual(nothing);
  });

  test('text is cleaned of control characters and cut', () => {
    const make = `As\u0000ter\u001b[31m \u202e${'x'.repeat(300)}`;
    const capture = readCapture({ ifd0: { 271: make } });
    expect(capture.make).toMatch(/^As ter \[31m x+$/);
    expect(capture.make).toHaveLength(100);
  });

  test('sensitivity 65535 points to the long fields', () => {
    expect(readCapture({ exif: { 34855: 65_535, 34866: 102_400 } }).iso).toBe(102_400);
    expect(readCapture({ exif: { 34855: [400, 0] } }).iso).toBe(400);
  });

  test('manual exposure mode stands in for an undefined program', () => {
    expect(readCapture({ exif: { 34850: 0, 41986: 1 } }).program).toBe('manual');
  });

  test('no cut of an Exif block crashes', async () => {
    const bytes = await blank()
      .withExif({ IFD0: { Make: 'Aster' }, IFD2: { FNumber: '56/10', ISOSpeedRatings: '100' } })
      .jpeg()
      .toBuffer();
    const at = bytes.indexOf('Exif\0\0');
    const length = bytes.readUInt16BE(at - 2);
    for (let cut = 0; cut < length - 10; cut += 3) {
      const damaged = Buffer.from(bytes);
      damaged.fill(0xff, at + 8 + cut, Math.min(at + 8 + cut + 6, at + length - 2));
      const outcome = await decode(damaged);
      expect(outcome.frame.width).toBe(64);
    }
  });
});
