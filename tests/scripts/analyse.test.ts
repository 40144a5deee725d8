import { spawnSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import sharp from 'sharp';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { renderScene } from '@/fixtures/scene/render';
import { analysisOutputSchema, failureOutputSchema } from '@/lib/shared/analysis-output';
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
