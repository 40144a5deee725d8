import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, normalize } from 'node:path';
import { describe, expect, test } from 'vitest';

const rooms = [
  'analysis',
  'app',
  'components',
  'fixtures',
  'lib',
  'migrations',
  'models',
  'scripts',
];

const files = rooms
  .flatMap((room) =>
    readdirSync(room, { recursive: true, encoding: 'utf8' }).map((file) => join(room, file)),
  )
  .filter((file) => /\.(ts|tsx|mts)$/.test(file))
  .map((path) => ({ path, text: readFileSync(path, 'utf8') }));

/** Paths from the root that a file imports, types included; packages keep their names. */
function importsOf({ path, text }: { path: string; text: string }): string[] {
  const specifiers = [...text.matchAll(/(?:from|import)\s*\(?\s*['"]([^'"]+)['"]/g)].map(
    (m) => m[1]!,
  );
  return specifiers.map((name) => {
    if (name.startsWith('@/')) return name.slice(2);
    return name.startsWith('.') ? normalize(join(dirname(path), name)) : name;
  });
}

const below = (path: string, room: string) => path === room || path.startsWith(`${room}/`);

/** DEVELOPERS.md: analysis ← lib/shared ← lib/server ← app; components take lib/shared, lib/client and analysis. */
const forbidden: Record<string, string[]> = {
  analysis: ['app', 'components', 'lib', 'models', 'migrations', 'scripts', 'fixtures'],
  'lib/shared': ['app', 'components', 'models', 'lib/server', 'lib/client', 'scripts', 'fixtures'],
  'lib/client': ['app', 'models', 'lib/server', 'scripts', 'fixtures'],
  'lib/server': ['app', 'components', 'lib/client', 'scripts', 'fixtures'],
  models: ['app', 'components', 'lib/server', 'lib/client', 'migrations', 'scripts', 'fixtures'],
  components: ['app', 'models', 'lib/server', 'scripts', 'fixtures'],
  app: ['models', 'migrations', 'scripts', 'fixtures'],
  migrations: ['app', 'components', 'lib', 'models', 'analysis'],
  'fixtures/scene': ['app', 'components', 'lib', 'models', 'scripts'],
};

describe('imports point one way', () => {
  test.each(Object.entries(forbidden))('%s knows nothing of %j', (room, strangers) => {
    const wrong = files
      .filter(({ path }) => below(path, room))
      .flatMap((file) =>
        importsOf(file)
          .filter((name) => strangers.some((stranger) => below(name, stranger)))
          .map((name) => `${file.path} → ${name}`),
      );
    expect(wrong).toEqual([]);
  });

  test('the scene renderer shares nothing with the analysis but the target, the timing page’s geometry and its types', () => {
    const shared = files
      .filter(({ path }) => below(path, 'fixtures/scene'))
      .flatMap((file) => importsOf(file).filter((name) => below(name, 'analysis')))
      .filter(
        (name) =>
          !/^analysis\/(target\/target(-\dx\d)?|time\/timing-page\.json|image|result)(\.(ts|json))?$/.test(
            name,
          ),
      );
    expect(shared).toEqual([]);
  });

  test('only decode and capture reach outside the pure code of analysis', () => {
    const outside = files
      .filter(({ path }) => below(path, 'analysis'))
      .filter((file) => importsOf(file).some((name) => /^(sharp|exifr|node:)/.test(name)))
      .map(({ path }) => path);
    for (const path of outside) expect(path).toMatch(/^analysis\/(decode|capture|icc)\.ts$/);
  });
});

test('every file of lib/server begins with server-only, but for what runs in a worker thread', () => {
  const server = files.filter(({ path }) => below(path, 'lib/server'));
  const open = server
    .filter(({ text }) => !text.startsWith("import 'server-only';"))
    .map(({ path }) => path);
  // A worker thread has no bundler that knows of server-only.
  expect(open.filter((path) => !workerThread.includes(path))).toEqual([]);
  expect(server.length).toBeGreaterThan(30);
});
const workerThread = ['lib/server/worker/analyse-shot.ts', 'lib/server/worker/pictures.ts'];

test('only env.ts reads the environment of the product', () => {
  const readers = files
    .filter(({ path }) =>
      ['app', 'components', 'lib', 'models', 'analysis'].some((room) => below(path, room)),
    )
    .filter(({ text }) => /\bprocess\.env\b/.test(text))
    .map(({ path }) => path);
  expect(readers).toEqual(['lib/server/env.ts']);
});

// stack.md: an untyped raw query throws "Cannot delete property 'meta'" with this driver.
test('every raw query of the product names its type', () => {
  const calls = files
    .filter(({ path }) => ['app', 'lib', 'models'].some((room) => below(path, room)))
    .flatMap(({ path, text }) =>
      [...text.matchAll(/\.query(?:<[^>]*>)?\(/g)].map((match) => ({
        path,
        call: text.slice(match.index, text.indexOf(');', match.index)),
      })),
    );
  expect(calls.length).toBeGreaterThan(0);
  for (const { path, call } of calls) expect(call, path).toContain('type: QueryTypes.');
});

// The one helper that can't be called without the shop: a query of the verbs that leaves it out stands out here.
test('every query of a shop’s rows in the verbs goes through inShop', () => {
  const owned =
    'CameraModel|Unit|StateChange|LogEntry|FunctionCheck|Run|Shot|Original|Analysis|Measurement|Scheme|Grade|RuleResult|Report|ReportVersion';
  const reading = new RegExp(
    `\\b(?:${owned})\\.(?:findAll|findOne|findByPk|findAndCountAll|count|update|destroy|findOrCreate)\\(`,
    'g',
  );
  const reads = files
    .filter(({ path }) => below(path, 'lib/server') && !below(path, 'lib/server/worker'))
    .flatMap(({ path, text }) =>
      [...text.matchAll(reading)].map((match) => ({
        path,
        text,
        call: argumentsOf(text, match.index + match[0].length),
      })),
    );
  const unscoped = reads
    .filter(({ call, text }) => !scoped(call, text) && !publicReads.includes(call))
    .map(({ path, call }) => `${path}: ${call}`);
  expect(reads.length).toBeGreaterThan(30);
  expect(unscoped).toEqual([]);
});

/** The shop is named in the call, or in the condition that it takes by name. */
const scoped = (call: string, file: string) =>
  call.includes('inShop(') ||
  (/\bwhere(: mine)?\b(?!:)/.test(call) && /const (where|mine) =[^;]*inShop\(/.test(file));

/** A report is read by its address, which can't be guessed, by anyone. */
const publicReads = ["{ where: { slug }, include: ['versions'] }"];

/** What stands between a call's parentheses. */
function argumentsOf(text: string, start: number): string {
  let depth = 1;
  let end = start;
  while (depth > 0 && end < text.length) {
    if (text[end] === '(') depth++;
    if (text[end] === ')') depth--;
    end++;
  }
  return text.slice(start, end - 1);
}

test('no barrel files', () => {
  const barrels = files.filter(
    ({ path, text }) => /(^|\/)index\.tsx?$/.test(path) || /^export \* from/m.test(text),
  );
  expect(barrels.map(({ path }) => path)).toEqual([]);
});
