import { spawnSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { renderScene } from '@/fixtures/scene/render';
import { renderTimingPage } from '@/fixtures/scene/timing-page';
import {
  analysisOutputSchema,
  failureOutputSchema,
  groupOutputSchema,
} from '@/lib/shared/analysis-output';
import { temporaryFolder } from '../oracles/folder';

const folder = temporaryFolder();
afterAll(folder.remove);

const files = {
  target: folder.path('target.jpg'),
  broken: folder.path('broken.jpg'),
  scene: folder.path('scene.png'),
};

beforeAll(async () => {
  const { bytes } = await renderScene({
    width: 1200,
    height: 900,
    exif: { make: 'Aster', program: 1 },
  });
  writeFileSync(files.target, bytes);
  writeFileSync(files.broken, bytes.subarray(0, bytes.length >> 1));
  await sharp({ create: { width: 320, height: 240, channels: 3, background: '#708090' } }).toFile(
    files.scene,
  );
}, 120_000);

function analyse(...args: string[]) {
  const { status, stdout, stderr } = spawnSync(
    'npm',
    ['run', '--silent', 'analyse', '--', ...args],
    {
      encoding: 'utf8',
    },
  );
  const lines: unknown[] = stdout
    .split('\n')
    .filter(Boolean)
    .map((line) => JSON.parse(line));
  return { status, lines, stderr };
}

test('one line a file, in order; a bad file gives an error line and status 1 after the others are done', () => {
  const { status, lines } = analyse(
    files.broken,
    files.target,
    folder.path('none.jpg'),
    files.scene,
  );
  expect(status).toBe(1);
  expect(lines).toHaveLength(4);
  expect(failureOutputSchema.parse(lines[0])).toMatchObject({
    file: files.broken,
    error: { code: 'damaged-file' },
  });
  const target = analysisOutputSchema.parse(lines[1]);
  expect(target).toMatchObject({ file: files.target, kind: 'target', width: 1200, height: 900 });
  expect(target.capture.make).toBe('Aster');
  expect(Object.keys(target.registration?.rings ?? {})).toHaveLength(5);
  expect(failureOutputSchema.parse(lines[2]).error.code).toBe('file-unreadable');
  expect(analysisOutputSchema.parse(lines[3]).kind).toBe('scene');
});

test('status 0 when all went well', () => {
  const { status, lines } = analyse('--kind', 'scene', files.scene);
  expect(status).toBe(0);
  expect(analysisOutputSchema.parse(lines[0]).kind).toBe('scene');
});

async function photographs(name: string, pictures: Promise<Buffer>[]) {
  return Promise.all(
    pictures.map(async (picture, i) => {
      const file = folder.path(`${name}-${i}.jpg`);
      writeFileSync(file, await picture);
      return file;
    }),
  );
}

test('a ladder: a line a file, then one of the group with a step a rung', async () => {
  const rung = async (exposureEv: number, exposureTime: number) => {
    const exif = { exposureTime, fNumber: 5.6, iso: 100, program: 1 };
    return (await renderScene({ width: 900, height: 675, exposureEv, exif })).bytes;
  };
  const rungs = [rung(-1, 1 / 250), rung(0, 1 / 125), rung(1, 1 / 60)];
  const ladder = await photographs('ladder', rungs);
  const { status, lines } = analyse('--kind', 'ladder', ...ladder);
  expect(status).toBe(0);
  expect(lines).toHaveLength(4);
  for (const line of lines.slice(0, 3))
    expect(analysisOutputSchema.parse(line).kind).toBe('ladder');
  const { group, files: measured, metrics } = groupOutputSchema.parse(lines[3]);
  expect(group).toBe('ladder');
  expect(measured).toEqual(ladder);
  expect(metrics.map(({ name, zone }) => `${name} ${zone ?? ''}`.trim())).toEqual([
    'ladder.step 1/250',
    'ladder.step 1/125',
    'ladder.step 1/60',
    'ladder.worst',
  ]);
}, 120_000);

test('the timing page: a photograph without it fails, the others give the mean', async () => {
  const shot = (startFrame: number) => renderTimingPage({ width: 640, height: 480, startFrame });
  const series = await photographs('lag', [shot(10.2), shot(12.2)]);
  const { status, lines } = analyse('--kind', 'lag', series[0]!, files.scene, series[1]!);
  expect(status).toBe(1);
  expect(lines).toHaveLength(4);
  expect(failureOutputSchema.parse(lines[1]).error.code).toBe('no-timing-page');
  const { group, files: measured, metrics, warnings } = groupOutputSchema.parse(lines[3]);
  expect({ group, measured }).toEqual({ group: 'lag', measured: series });
  // Frames 10 and 12 of 16.67 ms, each read within a frame.
  expect(Math.abs(metrics[0]!.value - 11 * 16.67)).toBeLessThan(16.67);
  expect(warnings.map(({ code }) => code)).toContain('lag-few-shots');
}, 120_000);

test.each([
  [['--kind', 'portrait', 'x.jpg']],
  [['--target', '1x1', 'x.jpg']],
  [['--colour', 'x.jpg']],
  [[]],
])('wrong usage %j prints how it is used and nothing on standard output', (args) => {
  const { status, lines, stderr } = analyse(...args);
  expect(status).toBe(2);
  expect(lines).toEqual([]);
  expect(stderr).toContain('Usage: npm run --silent analyse');
});
