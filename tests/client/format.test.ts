import { expect, test } from 'vitest';
import {
  about,
  age,
  amountText,
  bookedTime,
  bytes,
  day,
  exposureTime,
  money,
  parseMoney,
} from '@/lib/client/format';
import { gap } from '@/lib/shared/numbers';

// Source: ISO 4217, minor units: EUR 2, JPY 0.
test.each([
  ['42.50', 'EUR', 4250],
  ['42,5', 'EUR', 4250],
  ['0.29', 'EUR', 29],
  ['1200', 'JPY', 1200],
  ['', 'EUR', undefined],
  ['12.345', 'EUR', Number.NaN],
  ['twelve', 'EUR', Number.NaN],
  ['-3', 'EUR', Number.NaN],
])('"%s" in %s is %d minor units', (typed, currency, minor) => {
  expect(parseMoney(typed, currency)).toEqual(minor);
});

// Truth: what is typed back is the same amount.
test.each([
  [4250, 'EUR', '42.50'],
  [29, 'EUR', '0.29'],
  [1200, 'JPY', '1200'],
])('%d minor units in %s are typed "%s"', (minor, currency, text) => {
  expect(amountText(minor, currency)).toBe(text);
  expect(parseMoney(text, currency)).toBe(minor);
});

test('money is written in its currency', () => {
  expect(money(4250, 'EUR')).toBe('€42.50');
  expect(money(1200, 'JPY')).toBe('JP¥1,200');
});

test('dates are unambiguous and the same in every zone', () => {
  expect(day('2026-03-14T23:59:59.000Z')).toBe('14 Mar 2026');
});

// Truth by construction.
test.each([
  [60_000, '1 minute'],
  [5 * 3_600_000, '5 hours'],
  [72 * 3_600_000, '3 days'],
])('%d ms ago reads %s', (milliseconds, words) => {
  const now = Date.parse('2026-03-14T12:00:00Z');
  expect(age(new Date(now - milliseconds).toISOString(), now)).toBe(words);
});

test('sizes, pace and booked time carry their unit', () => {
  expect(bytes(4_840_000)).toBe(`4.8${gap}MB`);
  expect(bytes(300)).toBe(`1${gap}kB`);
  expect(about(9)).toBe(`about 9${gap}s`);
  expect(about(130)).toBe(`about 2${gap}min`);
  expect(bookedTime(95)).toBe(`1${gap}h 35${gap}min`);
});

// Common practice, no source: cameras label times below 0.4 s as fractions.
test.each([
  [0.008, `1/125${gap}s`],
  [0.5, `0.5${gap}s`],
  [2, `2${gap}s`],
])('%d s is written %s', (seconds, words) => expect(exposureTime(seconds)).toBe(words));
