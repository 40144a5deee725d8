import { expect, test } from 'vitest';
import { searchOf, unitQueryOf, unitsPath } from '@/lib/client/units-path';
import { withShot } from '@/lib/client/use-run-events';
import type { RunDetail, ShotRow } from '@/lib/shared/api';

test('a list’s address holds only what differs from the defaults, and reads back the same', () => {
  const query = unitQueryOf(new URLSearchParams('q=ax+5&state=testing&sort=tag&order=asc&page=3'));
  expect(searchOf(query)).toBe('q=ax+5&state=testing&sort=tag&order=asc&page=3');
  expect(searchOf(unitQueryOf({}))).toBe('');
  expect(unitsPath('')).toBe('/api/units');
});

test('nonsense in the address gives the first page', () => {
  expect(unitQueryOf(new URLSearchParams('page=-4&sort=password'))).toMatchObject({
    page: 1,
    sort: 'changed',
  });
});

test('a shot’s event takes its place in the run and the counts follow', () => {
  const shot = (id: string, state: ShotRow['state']) => ({ id, state }) as ShotRow;
  const run = { shotList: [shot('a', 'queued')], shots: 1, done: 0, failed: 0 } as RunDetail;
  const changed = withShot(withShot(run, shot('a', 'done')), shot('b', 'failed'));
  expect(changed.shotList.map((s) => s.id)).toEqual(['a', 'b']);
  expect(changed).toMatchObject({ shots: 2, done: 1, failed: 1 });
});
