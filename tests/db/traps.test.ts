import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { QueryTypes } from 'sequelize';
import { afterAll, expect, test } from 'vitest';
import { db } from '@/lib/server/db';
import { newId } from '@/models/id';

// The traps of the database found by running (shared/stack.md, "Database"), each held by a test.

afterAll(async () => {
  await db().sequelize.close();
});

test('SKIP LOCKED really skips: a second transaction gets the other row at once', async () => {
  const { Job, sequelize } = db();
  const subjects = [newId(), newId()].sort();
  for (const subjectId of subjects) await Job.create({ kind: 'trap', subjectId, pendingKey: null });
  const sql = "SELECT subjectId FROM jobs WHERE kind = 'trap' LIMIT 1 FOR UPDATE SKIP LOCKED";
  const first = await sequelize.transaction();
  const second = await sequelize.transaction();
  const lockOne = (transaction: typeof first) =>
    sequelize.query<{ subjectId: string }>(sql, { type: QueryTypes.SELECT, transaction });
  const got = [await lockOne(first), await lockOne(second)].map(([row]) => row?.subjectId);
  await first.rollback();
  await second.rollback();
  expect(got.sort()).toEqual(subjects);
});

test('a time keeps its milliseconds and its zone', async () => {
  const at = new Date('2026-03-29T01:59:59.987Z'); // in the hour that Europe's clocks leave out
  const { id } = await db().Attempt.create({ bucket: 'time', at });
  expect((await db().Attempt.findByPk(id))?.at.toISOString()).toBe(at.toISOString());
  const [row] = await db().sequelize.query<{ text: string }>(
    'SELECT CAST(at AS CHAR) AS text FROM attempts WHERE id = ?',
    { type: QueryTypes.SELECT, replacements: [id] },
  );
  expect(row?.text).toBe('2026-03-29 01:59:59.987');
});

test('no raw query in the source goes without a type', () => {
  const untyped: string[] = [];
  for (const folder of ['app', 'lib', 'models', 'migrations', 'scripts', 'fixtures']) {
    for (const name of readdirSync(folder, { recursive: true, encoding: 'utf8' })) {
      if (!/\.tsx?$/.test(name)) continue;
      const text = readFileSync(join(folder, name), 'utf8');
      for (const call of text.matchAll(/equelize\.query\b/g)) {
        if (!/type:\s*QueryTypes\./.test(statementFrom(text, call.index))) {
          untyped.push(join(folder, name));
        }
      }
    }
  }
  expect(untyped).toEqual([]);
});

test('an untyped SELECT does throw, which is why the test above exists', async () => {
  await expect(db().sequelize.query('SELECT 1 AS one')).rejects.toThrow('meta');
});

/** From a call to the bracket that closes its arguments. */
function statementFrom(text: string, start: number): string {
  const open = text.indexOf('(', start);
  let depth = 0;
  for (let i = open; i < text.length; i++) {
    if (text[i] === '(') depth++;
    if (text[i] === ')' && --depth === 0) return text.slice(start, i + 1);
  }
  return text.slice(start);
}
