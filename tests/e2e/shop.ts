import { createHash } from 'node:crypto';
import { type APIRequestContext, type APIResponse, request } from 'playwright-core';
import { vi } from 'vitest';
import { keptMails } from '@/fixtures/fakes/mail';
import type { ReportRow, RunDetail, UnitDetail } from '@/lib/shared/api';
import { demoPassword, demoPeople } from '@/lib/shared/demo';
import { functionCheckItems, type Role } from '@/lib/shared/words';

export function personOf(role: Role) {
  const person = demoPeople.find((candidate) => candidate.role === role);
  if (!person) throw new Error(`The demo shop has no ${role}.`);
  return { ...person, password: demoPassword };
}

/** Signs in as a browser would, for preparing what a test is not about. */
export async function callerAs(
  appUrl: string,
  { email, password }: { email: string; password: string },
): Promise<APIRequestContext> {
  const caller = await request.newContext({ baseURL: appUrl, timeout: 60_000 });
  const { csrfToken } = await json<{ csrfToken: string }>(await caller.get('/api/auth/csrf'));
  await caller.post('/api/auth/callback/credentials', {
    form: { csrfToken, email, password, json: 'true' },
  });
  await json(await caller.get('/api/units'));
  return caller;
}

export async function json<T>(response: APIResponse): Promise<T> {
  if (!response.ok()) throw new Error(`${response.url()}: ${await response.text()}`);
  return (await response.json()) as T;
}

const post = async <T>(caller: APIRequestContext, path: string, data: object): Promise<T> =>
  json<T>(await caller.post(path, { data }));

/** A camera on the bench, checked, with these photographs dropped onto a run after the repair. */
export async function testedUnit(
  refurbisher: APIRequestContext,
  serial: string,
  photographs: Buffer[],
): Promise<{ tag: string; runId: string }> {
  const { tag } = await post<UnitDetail>(refurbisher, '/api/units', {
    maker: 'Tarnfell',
    model: 'Skiff 12',
    modelClass: 'small-sensor-compact',
    serial,
    fault: 'Lens does not come out',
  });
  const unit = `/api/units/${tag}`;
  await post(refurbisher, `${unit}/state`, { to: 'on-the-bench' });
  await post(refurbisher, `${unit}/log`, { kind: 'action', text: 'Cleaned the zoom gears' });
  const checks = functionCheckItems.map(({ id }) => ({ item: id, outcome: 'pass' }));
  await json(await refurbisher.put(`${unit}/checks`, { data: { checks } }));
  const run = { title: 'After the repair', phase: 'after' };
  const { id: runId } = await post<{ id: string }>(refurbisher, `${unit}/runs`, run);
  await post(refurbisher, `${unit}/state`, { to: 'testing' });
  for (const [index, bytes] of photographs.entries()) {
    const sha256 = createHash('sha256').update(bytes).digest('hex');
    await json(await refurbisher.put(`/api/uploads/${sha256}`, { data: bytes }));
    await post(refurbisher, `/api/runs/${runId}/shots`, { sha256, name: `IMG_${index + 1}.JPG` });
  }
  return { tag, runId };
}

export const readRun = async (caller: APIRequestContext, id: string): Promise<RunDetail> =>
  json<RunDetail>(await caller.get(`/api/runs/${id}`));

/** Waits until every shot of a run is measured. */
export async function measured(caller: APIRequestContext, runId: string): Promise<void> {
  const over = async () => {
    const { shots, done, failed, shotList } = await readRun(caller, runId);
    if (failed > 0) throw new Error(shotList.map(({ error }) => error).join(' '));
    return done === shots;
  };
  await vi.waitUntil(over, { timeout: 120_000, interval: 300 });
}

export const sendToGrading = (caller: APIRequestContext, tag: string) =>
  post(caller, `/api/units/${tag}/state`, { to: 'awaiting-grade' });

/** Signs what is proposed and publishes it. */
export async function published(grader: APIRequestContext, tag: string): Promise<ReportRow> {
  const { letter } = await json<{ letter: string }>(await grader.get(`/api/units/${tag}/proposal`));
  await post(grader, `/api/units/${tag}/grade`, { letter });
  return post<ReportRow>(grader, `/api/units/${tag}/report`, {});
}

/** The link in the newest mail to an address, once the mail fake has got it. */
export async function mailedLink(
  mailFolder: string,
  to: string,
  path: 'invitations' | 'password',
): Promise<string> {
  const find = () =>
    keptMails(mailFolder)
      .filter((mail) => mail.to === to)
      .map(({ text }) => new RegExp(`\\S+/${path}/\\S+`).exec(text)?.[0])
      .findLast(Boolean);
  return (await vi.waitUntil(find, { timeout: 30_000 })) ?? '';
}
