import { expect, test } from 'vitest';
import { unitInputSchema, unitPatchSchema } from '@/lib/shared/schemas';

// Truth by construction: a patch holds what it names and nothing else.
test('what a patch does not name stays as it is', () => {
  expect(unitPatchSchema.parse({ fault: 'Display dark' })).toEqual({ fault: 'Display dark' });
  expect(unitPatchSchema.parse({ source: null, priceMinor: null })).toEqual({
    source: null,
    priceMinor: null,
  });
});

test('a unit is taken in with nothing beside it unless something is named', () => {
  const input = { maker: 'M', model: 'N', modelClass: 'small-sensor-compact', serial: '1' };
  expect(unitInputSchema.parse({ ...input, fault: 'dark' }).accessories).toEqual([]);
  expect(unitPatchSchema.safeParse({ maker: 'M' }).success).toBe(false);
});
