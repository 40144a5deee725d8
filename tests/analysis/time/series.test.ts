import { describe, expect, test } from 'vitest';
import { divisionOf, exactFNumber, exactSpeed, exactTime, timeLabel } from '@/analysis/time/series';
import apex from '@/fixtures/check-values/exposure-apex.json';

const { values } = apex;
const seconds = (label: string) => {
  const [over, under = '1'] = label.split('/');
  return Number(over) / Number(under);
};

// Source: check-values exposure_apex: ISO 516's nominal times, exact values 2^(n/3) and 2^(n/2).
describe('the exact number behind a label, to the table’s last printed digit', () => {
  test.each(values.shutter_third_stops)('$nominal s is $exact_s s', ({ nominal, exact_s }) => {
    expect(exactTime(seconds(nominal)) / exact_s).toBeCloseTo(1, 6);
  });
  test.each(values.shutter_half_stops)('in half stops $nominal s is $exact_s s', (row) => {
    expect(exactTime(seconds(row.nominal), 'half') / row.exact_s).toBeCloseTo(1, 6);
  });
  test.each(values.f_number_third_stops)('f/$nominal is f/$exact', ({ nominal, exact }) => {
    expect(exactFNumber(nominal) / exact).toBeCloseTo(1, 6);
  });
  test.each(values.iso_third_stops.filter(({ nominal }) => nominal <= 51_200))(
    'ISO $nominal is $exact',
    ({ nominal, exact }) => {
      expect(exactSpeed(nominal) / exact).toBeCloseTo(1, 5);
    },
  );
});

test('half stops are told by a time or an aperture that no third has', () => {
  expect(divisionOf([1 / 125, 1 / 90, 1 / 60])).toBe('half');
  expect(divisionOf([1 / 125, 1 / 60], [5.6, 6.7])).toBe('half');
  expect(divisionOf([1 / 125, 1 / 60, 1 / 30], [5.6, 8])).toBe('third');
});

test('what is no label stays: a stepless time, a lens’s own aperture, an exact time', () => {
  expect(exactTime(1 / 137)).toBe(1 / 137);
  expect(exactFNumber(3.1)).toBe(3.1);
  expect(exactTime(1 / 128)).toBe(1 / 128);
  // 10/600 as some files write it, and its four-digit decimal.
  expect(exactTime(0.0167)).toBe(1 / 64);
});

test('labels are written as on the camera', () => {
  expect([1 / 125, 1 / 128, 0.6, 2, 1 / 4, 1 / 8000].map(timeLabel)).toEqual([
    '1/125',
    '1/128',
    '0.6',
    '2',
    '1/4',
    '1/8000',
  ]);
});
