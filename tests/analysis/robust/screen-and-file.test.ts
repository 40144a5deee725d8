import { readFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { decode } from '@/analysis/decode';
import { renderScene } from '@/fixtures/scene/render';
import { temporaryFolder } from '../../oracles/folder';
import { missing, run } from '../../oracles/oracle';
import { confidentlyWrong, photograph, sound } from './judge';

const folder = temporaryFolder();
afterAll(folder.remove);

const jpeg = (quality: number, subsampling: '4:4:4' | '4:2:0' = '4:2:0') =>
  ({ type: 'jpeg', quality, subsampling }) as const;

describe('a target shown on a monitor', () => {
  test.each([
    ['its stripes of colour', { pitch: 3.3, depth: 0.35, turnDegrees: 1.5 }, jpeg(95, '4:4:4')],
    [
      'faint stripes whose colour is lost in 4:2:0',
      { pitch: 3.3, depth: 0.1, turnDegrees: 1.5 },
      jpeg(90),
    ],
    ['coloured moiré across', { pitch: 9.7, depth: 0.12, turnDegrees: 12 }, jpeg(92, '4:4:4')],
  ])('is known by %s, and light, colour and edges are left out', async (_, grid, format) => {
    const shot = await photograph({ exposureEv: -0.6, format }, [{ kind: 'screen', ...grid }]);
    expect(shot.message('target-on-screen')).toContain('Photograph the printed target');
    const left = shot.analysis.metrics.map((m) => m.name);
    expect(left.filter((n) => /^(colour|white|sharpness|noise|fringe|tone)\./.test(n))).toEqual([]);
    expect(left).toContain('distortion.corner');
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test.each([
    ['a sound print', { format: jpeg(95, '4:4:4') }],
    ['a noisy one', { snrDb: 23, format: jpeg(85) }],
    ['one compressed hard', { snrDb: 23, format: jpeg(40) }],
    ['one without compression', { snrDb: 30, format: { type: 'png' } as const }],
  ])('isn’t seen in %s', async (_, plan) => {
    const { codes } = await photograph(plan);
    expect(codes).not.toContain('target-on-screen');
    expect(codes).not.toContain('regular-pattern');
  });
});

describe('noise that isn’t the sensor’s any more', () => {
  test('after heavy noise reduction is told', async () => {
    const shot = await photograph({ snrDb: 30 }, [{ kind: 'denoise', sigma: 2, edge: 14 }]);
    expect(shot.message('noise-smoothed')).toContain('noise reduction');
    // The filter keeps edges and makes them steeper: their sharpness is the file's, not the planted one.
    expect(confidentlyWrong(shot, { except: ['sharpness.mtf50'] })).toEqual([]);
  });

  test('after an enlargement is told', async () => {
    const { bytes } = await renderScene({ ...sound, width: 1000, height: 750, snrDb: 30 });
    const enlarged = await sharp(bytes)
      .resize(2000)
      .jpeg({ quality: 95, chromaSubsampling: '4:4:4' })
      .toBuffer();
    const { warnings } = await analyseBytes(enlarged, { kind: 'target' });
    expect(warnings.find((w) => w.code === 'noise-smoothed')?.message).toContain('enlarged');
  });

  test('isn’t told of a sensor’s own noise', async () => {
    const { codes, find } = await photograph({ snrDb: 30, format: { type: 'png' } });
    expect(codes.filter((c) => c.startsWith('noise'))).toEqual([]);
    expect(find('noise.snr')).toBeDefined();
  });
});

describe('8 × 8 blocks', () => {
  test.each([40, 70])(
    'of JPEG quality %d are told; noise is left out, sharpness less certain',
    async (quality) => {
      const shot = await photograph({ format: jpeg(quality) });
      expect(shot.message('jpeg-coarse')).toContain('finest JPEG quality');
      expect(shot.codes).toContain('noise-rounded');
      expect(shot.find('noise.snr')).toBeUndefined();
      expect(confidentlyWrong(shot)).toEqual([]);
    },
  );

  test('of quality 85 aren’t', async () => {
    expect((await photograph({ format: jpeg(85) })).codes).not.toContain('jpeg-coarse');
  });
});

describe.skipIf(missing('exiftool'))('a file that isn’t the camera’s own', () => {
  /** With exiftool, because libvips writes the true size into Exif whatever it is told. */
  const withSize = async (width: number, height: number) => {
    const file = folder.path('size.jpg');
    await sharp({ create: { width: 96, height: 64, channels: 3, background: '#777' } })
      .jpeg()
      .toFile(file);
    const size = [`-ExifImageWidth=${width}`, `-ExifImageHeight=${height}`];
    run('exiftool', ['-q', '-overwrite_original', '-Make=Aster', ...size, file]);
    return readFileSync(file);
  };
  const codesOf = async (bytes: Uint8Array) => (await decode(bytes)).warnings.map((w) => w.code);

  test('whose Exif names another size is told to be resized', async () => {
    const { warnings } = await decode(await withSize(4000, 3000));
    const told = warnings.find((w) => w.code === 'resized-file');
    expect(told?.message).toMatch(/4000 × 3000 pixels and has 96 × 64/);
  });

  test.each([
    [96, 64],
    [64, 96],
  ])('whose Exif names its own size, upright or not (%d × %d), isn’t', async (width, height) => {
    expect(await codesOf(await withSize(width, height))).not.toContain('resized-file');
  });
});
