import { expect, test } from 'vitest';
import { changeHeadline, changes } from '@/lib/shared/compare';
import type { RuleOutcome } from '@/lib/shared/report';

const rule = (quantity: string, value: number | null, expanded: number) =>
  ({ ruleId: quantity, label: quantity, quantity, value, expanded, unit: '1' }) as RuleOutcome;
const verdictOf = (quantity: string, was: number, now: number, expanded: number) =>
  changes([rule(quantity, was, expanded)], [rule(quantity, now, expanded)])[0];

// Source: JCGM 100:2008, 5.1.2: independent uncertainties add in squares; 3 and 4 make 5.
test('the doubt of a change is the root of the sum of both squares', () => {
  const [change] = changes([rule('noise.snr', 20, 3)], [rule('noise.snr', 30, 4)]);
  expect(change?.by).toBe(10);
  expect(change?.expanded).toBe(5);
});

// Truth by construction; where good lies is the quantity's own.
test.each([
  ['noise.snr', 30, 36, 'better'],
  ['noise.snr', 36, 30, 'worse'],
  ['colour.error', 9, 2, 'better'],
  ['exposure.bias', -1.4, 0.1, 'better'],
  ['exposure.bias', 0.1, 0.9, 'worse'],
  ['colour.saturation', 140, 104, 'better'],
  ['colour.saturation', 100, 82, 'worse'],
  ['exposure.bias', 0.1, 0.11, 'same'],
])('%s from %d to %d is %s', (quantity, was, now, verdict) => {
  expect(verdictOf(quantity, was, now, 0.05)?.verdict).toBe(verdict);
});

test('what only one run measured is not compared, nor what the hand tried', () => {
  expect(changes([rule('noise.snr', null, 0)], [rule('noise.snr', 30, 1)])).toEqual([]);
  expect(changes([], [rule('noise.snr', 30, 1)])).toEqual([]);
  expect(changes([rule('checks.all', 1, 0)], [rule('checks.all', 0, 0)])).toEqual([]);
});

test('the headline names the one that changed and counts several', () => {
  const before = [rule('noise.snr', 20, 0), rule('colour.error', 2, 0), rule('white.error', 9, 0)];
  const after = [rule('noise.snr', 30, 0), rule('colour.error', 4, 0), rule('white.error', 1, 0)];
  expect(changeHeadline(changes(before, after))).toBe('2 results are better; colour.error: worse');
  expect(changeHeadline(changes(before, before))).toBe('No difference beyond the doubt');
});
