import { readdirSync } from 'node:fs';
import { resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { db } from '@/lib/server/db';
import { signGrade } from '@/lib/server/grades';
import { publish } from '@/lib/server/reports';
import type { Handler } from '@/lib/server/route';
import type { Actor } from '@/lib/shared/api';
import { makeHouse, photograph, requestOf, unitInput } from './house';
import { sent, tested } from './journey';

type Who = 'owner' | 'refurbisher' | 'grader' | 'stranger' | 'nobody';
const staff: Who[] = ['owner', 'refurbisher', 'grader'];
const bench: Who[] = ['owner', 'refurbisher'];
const graders: Who[] = ['owner', 'grader'];
const owners: Who[] = ['owner'];
const anyone: Who[] = [...staff, 'stranger', 'nobody'];
const signedIn: Who[] = [...staff, 'stranger'];

/**
 * Every route and method, with those who may. `stranger` is the owner of another shop: where a path names something of
 * this shop they may not, and the answer doesn't tell that it exists.
 */
const table: Record<string, Who[]> = {
  'GET /api/auth/[...nextauth]': anyone,
  'POST /api/auth/[...nextauth]': anyone,
  'GET /api/health': anyone,
  'GET /api/units': signedIn,
  'POST /api/units': [...bench, 'stranger'],
  'GET /api/units/[tag]': staff,
  'PATCH /api/units/[tag]': bench,
  'POST /api/units/[tag]/state': staff,
  'POST /api/units/[tag]/log': bench,
  'PUT /api/units/[tag]/checks': bench,
  'POST /api/units/[tag]/runs': bench,
  'GET /api/units/[tag]/proposal': staff,
  'POST /api/units/[tag]/grade': graders,
  'POST /api/units/[tag]/report': graders,
  'GET /api/runs/[id]': staff,
  'GET /api/runs/[id]/events': staff,
  'POST /api/runs/[id]/shots': bench,
  'HEAD /api/uploads/[sha256]': [...bench, 'stranger'],
  'PUT /api/uploads/[sha256]': [...bench, 'stranger'],
  'GET /api/shots/[id]': staff,
  'POST /api/shots/[id]/analyse': staff,
  'GET /api/shots/[id]/pictures/[name]': staff,
  'GET /api/grading': [...graders, 'stranger'],
  'GET /api/reports': signedIn,
  'POST /api/reports/[slug]/withdraw': graders,
  'GET /api/members': [...owners, 'stranger'],
  'PATCH /api/members/[id]': owners,
  'POST /api/invitations': [...owners, 'stranger'],
  'POST /api/invitations/[token]': anyone,
  'POST /api/password/forgotten': anyone,
  'POST /api/password/[token]': anyone,
  'GET /api/sessions': signedIn,
  'DELETE /api/sessions/[id]': signedIn,
  'PATCH /api/shop': [...owners, 'stranger'],
  'GET /api/targets/pdf': signedIn,
  'GET /r/[slug]': anyone,
  'GET /r/[slug]/report.json': anyone,
  'GET /r/[slug]/pictures/[name]': anyone,
};

const methods = ['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE'] as const;
type Method = (typeof methods)[number];
const files = readdirSync('app', { recursive: true, encoding: 'utf8' })
  .filter((file) => /(^|\/)route\.tsx?$/.test(file))
  .toSorted();
const pathOf = (file: string) =>
  `/${file}`.replace(/\/route\.tsx?$/, '').replaceAll(/\/\([^)]*\)/g, '');

const routes: { name: string; method: Method; path: string; handler: Handler }[] = [];
for (const file of files) {
  const module = (await import(/* @vite-ignore */ resolve('app', file))) as Partial<
    Record<Method, Handler>
  >;
  for (const method of methods) {
    const handler = module[method];
    const path = pathOf(file);
    if (handler) routes.push({ name: `${method} ${path}`, method, path, handler });
  }
}

test('every route and method of the file tree stands in the table, and nothing else', () => {
  expect(routes.map((route) => route.name).toSorted()).toEqual(Object.keys(table).toSorted());
});

let people: Record<Who, Actor | null>;
let params: Record<string, string>;
beforeAll(async () => {
  const [house, other] = await Promise.all([makeHouse(), makeHouse()]);
  people = { ...house, stranger: other.owner, nobody: null };
  const { tag } = await sent(house.refurbisher);
  await signGrade(house.grader, tag, { letter: 'A' });
  const { slug } = await publish(house.grader, tag);
  const open = await tested(house.refurbisher, { shots: 1 });
  const member = await db().Membership.findOne({
    where: { userId: house.grader.userId },
    rejectOnEmpty: true,
  });
  params = {
    tag: open.tag,
    runId: open.runId,
    shotId: open.shotIds[0]!,
    slug,
    memberId: member.id,
    sessionId: 'no such session',
    sha256: 'f'.repeat(64),
    token: 'no such token',
  };
});
afterAll(() => db().sequelize.close());

function paramsOf(path: string): Record<string, string> {
  const ids: Record<string, string> = {
    runs: 'runId',
    shots: 'shotId',
    members: 'memberId',
    sessions: 'sessionId',
  };
  const id = params[ids[path.split('/')[2] ?? ''] ?? ''] ?? '';
  const name = path.startsWith('/r/') ? 'view' : 'thumb';
  return { ...(params as Record<string, string>), id, name };
}

/** Bodies that are valid, so that a refusal is about the person and never about the words. */
const bodies: Record<string, unknown> = {
  'POST /api/units': unitInput(),
  'PATCH /api/units/[tag]': { fault: 'Display dark' },
  'POST /api/units/[tag]/state': { to: 'awaiting-grade' },
  'POST /api/units/[tag]/log': { kind: 'note', text: 'Looked at it.' },
  'PUT /api/units/[tag]/checks': { checks: [{ item: 'flash', outcome: 'pass' }] },
  'POST /api/units/[tag]/runs': { title: 'Another', phase: 'after' },
  'POST /api/units/[tag]/grade': { letter: 'A' },
  'POST /api/runs/[id]/shots': { sha256: 'f'.repeat(64), name: 'a.jpg' },
  'POST /api/shots/[id]/analyse': {},
  'POST /api/reports/[slug]/withdraw': { reason: 'A test.' },
  'PATCH /api/members/[id]': { role: 'grader' },
  'POST /api/invitations': { email: 'someone@example.org', role: 'grader' },
  'POST /api/invitations/[token]': { name: 'Someone', password: 'long enough to pass' },
  'POST /api/password/forgotten': { email: 'someone@example.org' },
  'POST /api/password/[token]': { password: 'long enough to pass' },
  'PATCH /api/shop': { signOwnWork: false },
};

/** next-auth answers by its own rules and has its own tests; the door to it is open to all. */
const own = routes.filter((route) => !route.path.startsWith('/api/auth/'));

describe.each(own)('$name', ({ name, method, path, handler }) => {
  test.each(anyone)('%s', async (who) => {
    const body =
      path.startsWith('/api/uploads') && method === 'PUT' ? await photograph() : bodies[name];
    const over = new AbortController();
    const request = await requestOf(people[who], method, path, body);
    const response = await handler(new Request(request, { signal: over.signal }), {
      params: Promise.resolve(paramsOf(path)),
    });
    over.abort();
    await response.body?.cancel();
    expect(verdictOf(response.status)).toBe(expectedOf(name, path, who));
  });
});

type Verdict = 'admitted' | 'sign in first' | 'forbidden' | 'not found';

/** A state that doesn't fit, or an invented token or hash, still means that the person was let in. */
function verdictOf(status: number): Verdict {
  if (status === 401) return 'sign in first';
  if (status === 403) return 'forbidden';
  return status === 404 ? 'not found' : 'admitted';
}

function expectedOf(name: string, path: string, who: Who): Verdict {
  if (table[name]?.includes(who)) return named404.has(name) ? 'not found' : 'admitted';
  if (who === 'nobody') return 'sign in first';
  return who === 'stranger' && path.includes('[') ? 'not found' : 'forbidden';
}

/** Here what the path or body names was made up, so that whoever is admitted finds nothing. */
const named404 = new Set([
  'HEAD /api/uploads/[sha256]',
  'POST /api/runs/[id]/shots',
  'DELETE /api/sessions/[id]',
  'POST /api/invitations/[token]',
  'POST /api/password/[token]',
]);

describe('a request from another site', () => {
  const post = routes.find((route) => route.name === 'POST /api/units')!;
  const send = async (headers: Record<string, string>) => {
    const request = await requestOf(people.owner, 'POST', '/api/units', unitInput());
    request.headers.delete('sec-fetch-site');
    for (const [header, value] of Object.entries(headers)) request.headers.set(header, value);
    return (await post.handler(request, { params: Promise.resolve({}) })).status;
  };

  // Source: Fetch Metadata Request Headers (W3C), Sec-Fetch-Site; RFC 6454, Origin.
  test.each([
    [{ 'sec-fetch-site': 'cross-site' }, 403],
    [{ 'sec-fetch-site': 'same-site' }, 403],
    [{ origin: 'https://evil.example' }, 403],
    [{ origin: 'null' }, 403],
    [{ 'sec-fetch-site': 'same-origin' }, 201],
    [{ origin: 'http://localhost:3000' }, 201],
    [{}, 201],
  ])('with %o is answered %d', async (headers, status) => {
    expect(await send(headers)).toBe(status);
  });

  test('may still read what is public', async () => {
    const health = routes.find((route) => route.name === 'GET /api/health')!;
    const request = new Request('http://localhost:3000/api/health', {
      headers: { 'sec-fetch-site': 'cross-site' },
    });
    const response = await health.handler(request, { params: Promise.resolve({}) });
    expect(response.status).toBe(200);
  });
});
