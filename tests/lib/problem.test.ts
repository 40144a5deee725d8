import { expect, test, vi } from 'vitest';
import { z } from 'zod';
import { MeasurementError } from '@/analysis/errors';
import { problemOf, problemResponse } from '@/lib/server/problem';
import { statusOf, UserError, type UserErrorCode } from '@/lib/shared/errors';
import { unitInputSchema } from '@/lib/shared/schemas';

// Source: RFC 9457, 3.1: type, title, status and detail; "about:blank" for problems without a page of their own.
test.each(Object.entries(statusOf) as [UserErrorCode, number][])(
  'a UserError “%s” is a problem with status %d and its own sentence',
  (code, status) => {
    const problem = problemOf(new UserError(code, 'Do this instead.'));
    expect(problem).toMatchObject({ type: 'about:blank', status, detail: 'Do this instead.' });
    expect(problem.title).not.toBe('');
  },
);

test('a form’s errors come back field by field, in the schema’s words', () => {
  const result = unitInputSchema.safeParse({
    maker: '',
    model: 'P5',
    modelClass: 'small-sensor-compact',
    serial: '1',
    fault: 'Dark',
    priceMinor: -1,
  });
  const problem = problemOf(result.error);
  expect(problem.status).toBe(422);
  expect(problem.fields).toEqual({
    maker: 'Enter the maker.',
    priceMinor: 'Enter an amount of zero or more.',
  });
});

test('a field inside a list is named by its path', () => {
  const schema = z.strictObject({ rows: z.array(z.strictObject({ name: z.string() })) });
  const { error } = schema.safeParse({ rows: [{ name: 'a' }, { name: 1 }] });
  expect(Object.keys(problemOf(error).fields ?? {})).toEqual(['rows.1.name']);
});

test('what can’t be measured is the sender’s to put right', () => {
  expect(problemOf(new MeasurementError('too-small', 'The picture has 12 pixels.'))).toMatchObject({
    status: 422,
    detail: 'The picture has 12 pixels.',
  });
});

test('anything else is logged and answered without its words', async () => {
  const log = vi.spyOn(console, 'error').mockImplementation(() => undefined);
  const error = new Error('password=hunter2 at 10.0.0.7');
  const response = problemResponse(error);
  expect(log).toHaveBeenCalledWith(error);
  log.mockRestore();
  expect(response.status).toBe(500);
  expect(response.headers.get('content-type')).toBe('application/problem+json');
  expect(await response.text()).not.toContain('hunter2');
});
