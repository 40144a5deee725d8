import { saveChecks } from '@/lib/server/checks';
import { createRun } from '@/lib/server/runs';
import { addShot } from '@/lib/server/shots';
import { changeState, createUnit } from '@/lib/server/units';
import { receiveOriginal } from '@/lib/server/uploads';
import type { Actor } from '@/lib/shared/api';
import { functionCheckItems } from '@/lib/shared/words';
import { photograph, plantAnalysis, requestOf, sha256Of, unitInput } from './house';

/** The way of a unit through the verbs, as far as a test needs it. */
export async function takenIn(actor: Actor, over: Parameters<typeof unitInput>[0] = {}) {
  return (await createUnit(actor, unitInput(over))).tag;
}

export async function uploaded(actor: Actor, bytes?: Uint8Array<ArrayBuffer>): Promise<string> {
  const file = bytes ?? (await photograph());
  const sha256 = sha256Of(file);
  const request = await requestOf(actor, 'PUT', `/api/uploads/${sha256}`, file);
  await receiveOriginal(actor, sha256, request);
  return sha256;
}

/** A unit in testing with one run after the repair and `shots` analysed target photographs. */
export async function tested(
  actor: Actor,
  { shots = 2, results = {} }: { shots?: number; results?: Record<string, number> } = {},
) {
  const tag = await takenIn(actor);
  await changeState(actor, tag, { to: 'on-the-bench' });
  await changeState(actor, tag, { to: 'testing' });
  await saveChecks(actor, tag, {
    checks: functionCheckItems.map(({ id }) => ({ item: id, outcome: 'pass' as const })),
  });
  const { id: runId } = await createRun(actor, tag, { title: 'After the repair', phase: 'after' });
  const shotIds: string[] = [];
  for (let i = 0; i < shots; i++) {
    const shot = await addShot(actor, runId, {
      sha256: await uploaded(actor),
      name: `IMG_${i}.JPG`,
    });
    await plantAnalysis(shot.id, results);
    shotIds.push(shot.id);
  }
  return { tag, runId, shotIds };
}

export async function sent(actor: Actor, options: Parameters<typeof tested>[1] = {}) {
  const journey = await tested(actor, options);
  await changeState(actor, journey.tag, { to: 'awaiting-grade' });
  return journey;
}
