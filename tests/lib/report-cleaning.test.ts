import { expect, test } from 'vitest';
import { cleaned, serialEnding } from '@/lib/server/report-cleaning';

test.each([
  ['HX2209317K31', '7K31'],
  ['7K31', '31'],
  ['9', ''],
  ['', ''],
])(
  'of the serial %o no more than the last four characters, or half, are public: %o',
  (serial, ending) => {
    expect(serialEnding(serial)).toBe(ending);
  },
);

test('the full serial and the staff’s names vanish from every text, whatever their case', () => {
  const content = {
    work: ['Ines Talvik reseated the cable of hx2209317k31.', 'Written by INES TALVIK'],
    grade: { reason: 'Serial HX2209317K31 checked', letter: 'B', n: 3, none: null },
  };
  const clean = cleaned(content, { serial: 'HX2209317K31', names: ['Ines Talvik'] });
  expect(clean).toEqual({
    work: ['a member of the shop reseated the cable of …7K31.', 'Written by a member of the shop'],
    grade: { reason: 'Serial …7K31 checked', letter: 'B', n: 3, none: null },
  });
});

test('a name inside another word stays', () => {
  expect(cleaned('The islander lens', { serial: '', names: ['Isla', 'lander'] })).toBe(
    'The islander lens',
  );
});
