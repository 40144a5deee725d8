import { writeFileSync } from 'node:fs';
import sharp from 'sharp';
import { describe, expect, test } from 'vitest';
import { measureFringes } from '@/analysis/chromatic/measure-fringes';
import { traceEdges } from '@/analysis/edge/trace-edges';
import type { ScenePlan } from '@/fixtures/scene/plan';
import { renderScene } from '@/fixtures/scene/render';
import { temporaryFolder } from '../../oracles/folder';
import { missing, run } from '../../oracles/oracle';
import { decodeFrame, truthRegistration } from '../sharpness/truth-registration';

const scene: ScenePlan = {
  width: 1200,
  height: 900,
  fill: 0.93,
  rotationDegrees: 1.2,
  blurSigma: 0.9,
  format: { type: 'png' },
};

async function measure(bytes: Buffer, truth: Parameters<typeof truthRegistration>[0]) {
  const frame = await decodeFrame(bytes);
  const registration = truthRegistration(truth);
  const traces = traceEdges(frame, registration, frame.toLinear);
  return measureFringes(frame, registration, traces, frame.chromaHalved ?? false);
}

// Truth by another program: ImageMagick magnifies red and moves blue by resampling (its cubic blurs a little, evenly).
test.skipIf(missing('imagemagick'))(
  'finds the magnification and the shift that ImageMagick gave red and blue, to 0.05 ‰ and 0.03 px',
  async () => {
    const { bytes, truth } = await renderScene(scene);
    const folder = temporaryFolder();
    try {
      const [from, to] = [folder.path('from.png'), folder.path('to.png')];
      writeFileSync(from, bytes);
      const warp = ['-filter', 'Cubic', '-virtual-pixel', 'edge', '-distort', 'SRT'];
      run('convert', [
        from,
        '-colorspace',
        'RGB',
        '-separate',
        '-set',
        'colorspace',
        'Gray',
        '(',
        '-clone',
        '0',
        ...warp,
        '600,450 1.001 0 600,450',
        ')',
        '(',
        '-clone',
        '2',
        ...warp,
        '600,450 1 0 600.3,449.8',
        ')',
        '-delete',
        '0',
        '-swap',
        '0,1',
        '-delete',
        '1',
        '-swap',
        '0,1',
        '-set',
        'colorspace',
        'RGB',
        '-combine',
        '-colorspace',
        'sRGB',
        to,
      ]);
      const warped = await sharp(to).png().toBuffer();
      const { metrics } = await measure(warped, truth);
      const value = (name: string) => metrics.find((m) => m.name === name)!.value;
      expect(Math.abs(value('fringe.redScale') - 1)).toBeLessThan(0.05);
      expect(Math.abs(value('fringe.blueScale'))).toBeLessThan(0.05);
      expect(Math.abs(value('fringe.shift') - Math.hypot(0.3, 0.2))).toBeLessThan(0.03);
    } finally {
      folder.remove();
    }
  },
);

// Truth: what the renderer plants; limits: measurements.md, "How close".
describe('planted displacement', () => {
  const planted: ScenePlan = {
    ...scene,
    redScalePermille: 0.8,
    blueScalePermille: -1.1,
    redShift: [0.2, -0.1],
    blueShift: [-0.15, 0.2],
    snrDb: 34,
  };
  test.each([
    { name: 'PNG', format: { type: 'png' }, median: 0.015, most: 0.05 },
    { name: 'JPEG 95 4:4:4', format: jpeg(95, '4:4:4'), median: 0.015, most: 0.05 },
    { name: 'JPEG 85 4:2:0', format: jpeg(85, '4:2:0'), median: 0.06, most: 0.12 },
  ] as const)(
    '$name: median $median px, 95 % within $most px',
    async ({ format, median, most }) => {
      const errors: number[] = [];
      let covered = 0;
      for (const seed of [1, 2]) {
        const { bytes, truth } = await renderScene({ ...planted, seed, format });
        const { metrics } = await measure(bytes, truth);
        for (const station of truth.stations)
          for (const colour of ['red', 'blue'] as const) {
            const found = metrics.find(
              (m) => m.name === `fringe.${colour}` && m.zone === station.id,
            );
            if (!found || station.imageHeight < 0.01) continue;
            const error = found.value - station[colour].radial;
            errors.push(Math.abs(error));
            if (Math.abs(error) < 2 * found.uncertainty) covered++;
          }
      }
      errors.sort((a, b) => a - b);
      const [middle, high] = [0.5, 0.95].map((p) => errors[Math.floor(p * errors.length)]!);
      console.info(
        `fringes of ${errors.length}: median ${middle!.toFixed(3)}, 95 % ${high!.toFixed(3)} px, within 2 u ${((100 * covered) / errors.length).toFixed(0)} %`,
      );
      expect(errors.length).toBeGreaterThan(40);
      expect(middle).toBeLessThan(median);
      expect(high).toBeLessThan(most);
    },
  );
});

function jpeg(quality: number, subsampling: '4:4:4' | '4:2:0') {
  return { type: 'jpeg', quality, subsampling } as const;
}

// Truth by construction: three equal channels.
test('a picture without fringes has none', async () => {
  const { bytes, truth } = await renderScene(scene);
  const { metrics } = await measure(bytes, truth);
  for (const m of metrics) expect(Math.abs(m.value)).toBeLessThan(0.005);
});
