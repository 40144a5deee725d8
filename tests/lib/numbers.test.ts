import { expect, test } from 'vitest';
import { decimalsOf, gap, numberText, withDoubt, withUnit } from '@/lib/shared/numbers';

// JCGM 100:2008, 7.2.6: the result is given to the place of its uncertainty's figures, at most two; one here, two where the first is a 1.
test.each([
  [-0.6849, 0.0612, 'EV', `−0.68 ± 0.06${gap}EV`],
  [58.31, 4.2, '%', `58 ± 4${gap}%`],
  [1721.4, 31, 'LW/PH', `1721 ± 31${gap}LW/PH`],
  [0.26543, 0.00312, 'cy/px', `0.265 ± 0.003${gap}cy/px`],
  [1.2, 0.4, 'deg', '1.2 ± 0.4°'],
  [-0.0213, 0.1189, 'EV', `−0.02 ± 0.12${gap}EV`],
  [1.16, 1.3, '%', `1.2 ± 1.3${gap}%`],
  [0.24664, 0.00131, 'cy/px', `0.247 ± 0.001${gap}cy/px`],
  [7.31, 12.4, '%', `7 ± 12${gap}%`],
  [0.4, 0.0961, 'px', `0.40 ± 0.10${gap}px`],
  [3.14, 0.2, 'ΔE00', `3.1 ± 0.2${gap}ΔE`],
  [2, 0, '1', '2'],
  [0.1234, 0, '%', `0.123${gap}%`],
  [0.2, 0.0000001, 'px', `0.200${gap}px`],
])('%d with doubt %d in %s reads %o', (value, expanded, unit, text) => {
  expect(withDoubt(value, expanded, unit)).toBe(text);
});

test('a minus is a minus, and nothing is minus nought', () => {
  expect(numberText(-1.5, 1)).toBe('−1.5');
  expect(numberText(-0.001, 2)).toBe('0.00');
  expect(withUnit('−3', 'deg')).toBe('−3°');
  expect(decimalsOf(0.05, 3)).toBe(2);
});
