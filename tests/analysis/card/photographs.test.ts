import { readFileSync } from 'node:fs';
import sharp from 'sharp';
import { describe, expect, test } from 'vitest';
import { card24 } from '@/analysis/card/card';
import { measureCard } from '@/analysis/card/measure-card';
import { toCode } from '@/analysis/colour/srgb';
import { decode } from '@/analysis/decode';
import published from '@/fixtures/colour-card-photos/published-means.json';

// Real photographs, their origin and licence in the README beside them. Corners read off by eye in the enlarged picture.
const corners = (...xy: number[]) => [0, 2, 4, 6].map((i) => ({ x: xy[i]!, y: xy[i + 1]! }));
const open = async (path: string) => (await decode(readFileSync(`fixtures/${path}`))).frame;
const card = card24('after-november-2014');

describe('published means of a photographed card’s patches', () => {
  const photographs = {
    source1: corners(160.6, 156.9, 242.8, 157.4, 240.6, 282.2, 159, 281.5),
    // Cut off by the picture's lower edge: the last two rows are missing.
    source2: corners(2, 2.3, 157.3, 3.3, 156.5, 239, 2, 239),
  };

  test.each(['source1', 'source2'] as const)('%s is met', async (name) => {
    const frame = await open(`colour-card-photos/${name}_img.png`);
    const { samples, turns, mirrored } = measureCard(frame, card, photographs[name]);
    expect([turns, mirrored]).toEqual([1, false]);
    const errors = published[name].flatMap(({ patch, rgb }) => {
      const sample = samples.find((s) => s.disc.id === patch);
      // Theirs are means of codes, ours of light: over an even patch they are the same.
      return sample
        ? [Math.max(...rgb.map((v, c) => Math.abs(toCode(sample.linear[c]!) - v)))]
        : [];
    });
    expect(errors.length).toBe(name === 'source1' ? 22 : 15);
    // The camera's sharpening rings into the smaller picture's 18 px patches, so that where one looks matters: one of them is 0.004 off.
    const far = errors.filter((error) => error > 0.003);
    expect(far.length).toBeLessThanOrEqual(name === 'source1' ? 1 : 0);
    expect(Math.max(...errors)).toBeLessThan(name === 'source1' ? 0.005 : 0.001);
  });

  test('patches outside the frame are counted in a warning', async () => {
    const frame = await open('colour-card-photos/source2_img.png');
    const { warnings, samples } = measureCard(frame, card, photographs.source2);
    expect(samples).toHaveLength(16);
    expect(warnings.map((w) => w.code)).toContain('card-cut-off');
  });

  test('source2 is darker than source1 on every patch, as its README says', async () => {
    const [one, two] = await Promise.all(
      (['source1', 'source2'] as const).map(async (name) =>
        measureCard(await open(`colour-card-photos/${name}_img.png`), card, photographs[name]),
      ),
    );
    for (const sample of two!.samples.filter((s) => !s.clipped)) {
      const other = one!.samples.find((s) => s.disc.id === sample.disc.id)!;
      if (!other.clipped) expect(sample.luminance).toBeLessThan(other.luminance);
    }
  });
});

describe('the authors’ own mask of a card', () => {
  const place = corners(15, 3, 361, 3, 339.5, 214, 35, 210);

  test('lies where the patches are read, and has their means', async () => {
    const frame = await open('sensor-captures/colour-target/white-balanced.tif');
    const { samples, turns } = measureCard(frame, card, place);
    expect(turns).toBe(0);
    expect(samples).toHaveLength(24);
    const { data: labels } = await sharp('fixtures/sensor-captures/colour-target/labels.png')
      .extractChannel(0)
      .raw()
      .toBuffer({ resolveWithObject: true });
    samples.forEach((sample, i) => {
      const at = Math.floor(sample.y) * frame.width + Math.floor(sample.x);
      expect(labels[at], sample.disc.id).toBe(i + 1);
      const codes = [0, 0, 0];
      let count = 0;
      for (let k = 0; k < labels.length; k++) {
        if (labels[k] !== i + 1) continue;
        count++;
        for (let c = 0; c < 3; c++) codes[c]! += frame.data[3 * k + c]!;
      }
      // Their mask reaches to the patches' rims, and light falls off across the picture: 4 % and a code.
      codes.forEach((sum, c) => {
        const theirs = sum / count;
        const ours = 255 * toCode(sample.linear[c]!);
        expect(Math.abs(ours - theirs), `${sample.disc.id} ${c}`).toBeLessThan(1 + 0.04 * theirs);
      });
    });
  });
});
