import { readFileSync } from 'node:fs';
import { converter } from 'culori';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { decode } from '@/analysis/decode';
import type { Analysis } from '@/analysis/result';
import { renderCodes } from '@/fixtures/scene/render';
import { temporaryFolder } from '../../oracles/folder';
import { missing, run } from '../../oracles/oracle';

const folder = temporaryFolder();
afterAll(folder.remove);

// The same scene, inside sRGB's gamut, written in two other spaces: their primaries and curves by culori (CSS Color 4), the profile
// by libvips; measured, it must come to the same.
const plan = {
  width: 1200,
  height: 900,
  fill: 0.94,
  saturation: 0.85,
  exposureEv: -0.3,
  format: { type: 'png', depth: 16 },
} as const;
const find = (a: Analysis, name: string) =>
  a.metrics.find((m) => m.name === name && !m.zone)!.value;

let codes: Uint16Array;
let plain: Analysis;
const raw = { width: 1200, height: 900, channels: 3 } as const;
beforeAll(async () => {
  codes = renderCodes(plan) as Uint16Array;
  plain = await analyseBytes(await sharp(codes, { raw }).toColourspace('rgb16').png().toBuffer());
}, 120_000);

type Colour = { r: number; g: number; b: number };

/** Codes of another RGB space; distinct colours are few, so each is worked out once. */
function convert(to: (colour: Colour & { mode: 'rgb' }) => Colour): Uint16Array {
  const known = new Map<string, number[]>();
  const out = new Uint16Array(codes.length);
  for (let i = 0; i < codes.length; i += 3) {
    const [r, g, b] = [codes[i]!, codes[i + 1]!, codes[i + 2]!];
    const key = `${r} ${g} ${b}`;
    let colour = known.get(key);
    if (!colour) {
      const c = to({ mode: 'rgb', r: r / 65535, g: g / 65535, b: b / 65535 });
      colour = [c.r, c.g, c.b].map((v) => Math.round(65535 * Math.min(1, Math.max(0, v))));
      known.set(key, colour);
    }
    out.set(colour, i);
  }
  return out;
}

describe('a 16-bit file in a wide-gamut space has sRGB’s saturation and colour error within 0.5 %:', () => {
  test('Display P3 by its profile', async () => {
    const wide = convert(converter('p3'));
    const image = sharp(wide, { raw }).toColourspace('rgb16');
    const bytes = await image.withIccProfile('p3').png().toBuffer();
    const { frame } = await decode(bytes);
    // The profile is attached and the codes are left as they are.
    expect(frame.toSrgb).not.toBeNull();
    expect(Buffer.from(frame.data.buffer, frame.data.byteOffset, 6000)).toEqual(
      Buffer.from(wide.buffer, 0, 6000),
    );
    compare(await analyseBytes(bytes));
  });

  test.skipIf(missing('exiftool'))('Adobe RGB (1998) by its Exif', async () => {
    const file = folder.path('adobe.tif');
    const image = sharp(convert(converter('a98')), { raw }).toColourspace('rgb16');
    await image.tiff({ compression: 'none' }).toFile(file);
    const tags = ['-ColorSpace#=65535', '-InteropIndex=R03', '-Make=Aster'];
    run('exiftool', ['-q', '-overwrite_original', ...tags, file]);
    const bytes = readFileSync(file);
    const { frame } = await decode(bytes);
    expect(frame.maxCode).toBe(65_535);
    expect(frame.toSrgb).not.toBeNull();
    compare(await analyseBytes(bytes));
  });
});

function compare(wide: Analysis) {
  expect(wide.warnings.map((w) => w.code)).not.toContain('colour-space-assumed');
  for (const name of ['colour.saturation', 'colour.error']) {
    const difference = Math.abs(find(wide, name) - find(plain, name));
    expect(difference, name).toBeLessThan(0.005 * find(plain, name) + 0.02);
  }
  expect(Math.abs(find(wide, 'exposure.bias') - find(plain, 'exposure.bias'))).toBeLessThan(0.005);
}
