import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { saveChecks } from '@/lib/server/checks';
import { db } from '@/lib/server/db';
import { addLogEntry } from '@/lib/server/log';
import { listModels } from '@/lib/server/models';
import {
  changeState,
  createUnit,
  getUnit,
  listUnits,
  stateCounts,
  updateUnit,
} from '@/lib/server/units';
import { type UnitQuery, unitQuerySchema } from '@/lib/shared/schemas';
import { makeHouse, unitInput } from './house';
import { sent, takenIn, tested } from './journey';

let house: Awaited<ReturnType<typeof makeHouse>>;
beforeAll(async () => {
  house = await makeHouse();
});
afterAll(() => db().sequelize.close());

const query = (over: Partial<UnitQuery> = {}) => unitQuerySchema.parse(over);

describe('taking in', () => {
  test('gives tags in order, without gaps, however many come at once', async () => {
    const { refurbisher } = await makeHouse();
    const tags = await Promise.all(Array.from({ length: 12 }, () => takenIn(refurbisher)));
    const expected = Array.from({ length: 12 }, (_, i) => `ML-${String(i + 1).padStart(4, '0')}`);
    expect(tags.toSorted()).toEqual(expected);
  });

  test('each shop counts its own tags', async () => {
    const [one, other] = await Promise.all([makeHouse(), makeHouse()]);
    expect(await takenIn(one.owner)).toBe('ML-0001');
    expect(await takenIn(other.owner)).toBe('ML-0001');
  });

  test('keeps one camera model a name, and refuses another class for it', async () => {
    const { owner } = await makeHouse();
    await takenIn(owner, { model: 'P7' });
    await takenIn(owner, { model: 'P7' });
    expect(await listModels(owner)).toHaveLength(1);
    const other = createUnit(
      owner,
      unitInput({ model: 'P7', modelClass: 'interchangeable-lens' }) as never,
    );
    await expect(other).rejects.toMatchObject({
      code: 'invalid',
      fields: { modelClass: expect.any(String) },
    });
  });

  // Times carry milliseconds (stack.md: DATE without (3) drops them).
  test('answers with times to the millisecond and the state’s first change', async () => {
    const unit = await getUnit(house.owner, await takenIn(house.refurbisher));
    expect(unit.receivedAt).toMatch(/^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/);
    expect(unit.state).toBe('received');
    expect(unit.changes).toMatchObject([
      { from: null, to: 'received', by: house.refurbisher.name },
    ]);
    expect(unit.spentMinor).toBe(2500);
  });
});

describe('the list', () => {
  test('finds by tag, serial, maker, model and fault, and takes % and _ for what they are', async () => {
    const { owner } = await makeHouse();
    const tag = await takenIn(owner, {
      serial: 'ZZ100%9_1',
      fault: 'Lens stuck',
      model: 'Kestrel 3',
    });
    await takenIn(owner, { serial: 'ZZ100x9y1' });
    const found = async (q: string) =>
      (await listUnits(owner, query({ q }))).rows.map((row) => row.tag);
    for (const q of [tag, '100%9_1', 'lens stuck', 'kestrel'])
      expect(await found(q)).toEqual([tag]);
    expect(await found('halvard')).toHaveLength(2);
    expect(await found('nothing like it')).toEqual([]);
  });

  test('pages, sorts and counts on the server', async () => {
    const { owner } = await makeHouse();
    for (const model of ['C1', 'A1', 'B1', 'E1', 'D1', 'F1']) await takenIn(owner, { model });
    const page = await listUnits(
      owner,
      query({ sort: 'model', order: 'asc', pageSize: 5, page: 2 }),
    );
    expect(page).toMatchObject({ total: 6, page: 2, pageSize: 5 });
    expect(page.rows.map((row) => row.model)).toEqual(['F1']);
    await changeState(owner, 'ML-0002', { to: 'on-the-bench' });
    expect(await stateCounts(owner)).toMatchObject({ received: 5, 'on-the-bench': 1, sold: 0 });
    const bench = await listUnits(owner, query({ state: 'on-the-bench' }));
    expect(bench.rows.map((row) => row.tag)).toEqual(['ML-0002']);
  });

  test.each(['tag', 'model', 'state', 'received', 'changed', 'grade'] as const)(
    'sorts by %s',
    async (sort) => {
      const up = await listUnits(house.owner, query({ sort, order: 'asc' }));
      const down = await listUnits(house.owner, query({ sort, order: 'desc' }));
      expect(up.total).toBe(down.total);
      expect(up.rows.map((row) => row.tag).toSorted()).toEqual(
        down.rows.map((row) => row.tag).toSorted(),
      );
    },
  );

  test('shows nothing of another shop', async () => {
    const other = await makeHouse();
    const tag = await takenIn(house.owner, { serial: 'ONLY-HERE-1' });
    expect((await listUnits(other.owner, query({ q: 'ONLY-HERE' }))).total).toBe(0);
    await expect(getUnit(other.owner, tag)).rejects.toMatchObject({ code: 'notFound' });
    await expect(updateUnit(other.owner, tag, { fault: 'x' })).rejects.toMatchObject({
      code: 'notFound',
    });
    await expect(changeState(other.owner, tag, { to: 'scrapped' })).rejects.toMatchObject({
      code: 'notFound',
    });
  });
});

describe('moving', () => {
  test('follows the table of states, and says so when it can’t', async () => {
    const tag = await takenIn(house.refurbisher);
    await expect(changeState(house.refurbisher, tag, { to: 'published' })).rejects.toMatchObject({
      code: 'conflict',
    });
    await changeState(house.refurbisher, tag, { to: 'on-the-bench', note: 'Opening it' });
    const unit = await getUnit(house.refurbisher, tag);
    expect(unit.changes.at(-1)).toMatchObject({
      from: 'received',
      to: 'on-the-bench',
      note: 'Opening it',
    });
  });

  test('to grading needs an analysed target photograph after the repair, and none still waiting', async () => {
    const { tag } = await tested(house.refurbisher, { shots: 0 });
    const send = () => changeState(house.refurbisher, tag, { to: 'awaiting-grade' });
    await expect(send()).rejects.toMatchObject({
      code: 'conflict',
      message: expect.stringContaining('Nothing to grade'),
    });
    const ready = await tested(house.refurbisher);
    await db().Shot.update({ state: 'queued' }, { where: { id: ready.shotIds[0]! } });
    await expect(
      changeState(house.refurbisher, ready.tag, { to: 'awaiting-grade' }),
    ).rejects.toMatchObject({ code: 'conflict' });
  });

  test('a grader sends a unit back, and moves nothing else', async () => {
    const { tag } = await sent(house.refurbisher);
    const unit = await changeState(house.grader, tag, { to: 'testing' });
    expect(unit.state).toBe('testing');
    await expect(changeState(house.grader, tag, { to: 'on-the-bench' })).rejects.toMatchObject({
      code: 'conflict',
    });
  });
});

describe('bench work', () => {
  test('is amended, never edited; only the amendment counts', async () => {
    const tag = await takenIn(house.refurbisher, { priceMinor: 1000 });
    const entry = { kind: 'part' as const, text: 'Display cable', minutes: 20, costMinor: 900 };
    const first = await addLogEntry(house.refurbisher, tag, entry);
    await addLogEntry(house.refurbisher, tag, {
      ...entry,
      costMinor: 700,
      minutes: 25,
      amends: first.id,
    });
    const unit = await getUnit(house.refurbisher, tag);
    expect(unit.log.map((row) => row.costMinor)).toEqual([900, 700]);
    expect(unit).toMatchObject({ spentMinor: 1700, minutes: 25 });
    const stranger = addLogEntry(house.refurbisher, await takenIn(house.refurbisher), {
      ...entry,
      amends: first.id,
    });
    await expect(stranger).rejects.toMatchObject({ code: 'invalid' });
  });

  test('a failed check opens a log entry; the newest outcome counts and the older stays', async () => {
    const tag = await takenIn(house.refurbisher);
    const save = (outcome: 'pass' | 'fail') =>
      saveChecks(house.refurbisher, tag, {
        checks: [{ item: 'flash', outcome, note: 'no light' }],
      });
    await save('fail');
    const checks = await save('pass');
    expect(checks).toMatchObject([{ item: 'flash', label: 'Flash', outcome: 'pass' }]);
    const unit = await getUnit(house.refurbisher, tag);
    expect(unit.log).toMatchObject([{ kind: 'symptom', text: 'Flash failed its check: no light' }]);
    expect(
      await db().FunctionCheck.count({ where: { note: 'no light', shopId: house.shop.id } }),
    ).toBe(2);
  });

  test('is closed while a grade is awaited', async () => {
    const { tag } = await sent(house.refurbisher);
    const late = addLogEntry(house.refurbisher, tag, { kind: 'note', text: 'late' });
    await expect(late).rejects.toMatchObject({ code: 'conflict' });
    expect((await getUnit(house.refurbisher, tag)).may).toMatchObject({
      log: false,
      check: false,
      test: false,
    });
  });
});
