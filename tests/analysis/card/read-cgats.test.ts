import { describe, expect, test } from 'vitest';
import { patchesFromCgats, readCgats } from '@/analysis/card/read-cgats';
import { MeasurementError } from '@/analysis/errors';

// ISO 28178 (from ANSI CGATS.17): keywords, BEGIN_DATA_FORMAT … END_DATA_FORMAT, BEGIN_DATA … END_DATA. The layout is from memory.
const sound = `CGATS.17
ORIGINATOR "bench ""two"""
DESCRIPTOR "card 7" # measured twice
NUMBER_OF_FIELDS 5
BEGIN_DATA_FORMAT
SAMPLE_ID SAMPLE_NAME LAB_L LAB_A LAB_B
END_DATA_FORMAT
NUMBER_OF_SETS 2
BEGIN_DATA
1 "dark skin" 37.99 13.56 14.06
2 "light skin" 65.71
  18.13 17.81
END_DATA
`;

const complaint = (text: string) => {
  try {
    patchesFromCgats(text);
  } catch (error) {
    if (error instanceof MeasurementError) return `${error.code}: ${error.message}`;
    throw error;
  }
  return 'read';
};

describe('a CGATS file', () => {
  test('gives its header, fields and sets, rows over several lines included', () => {
    const file = readCgats(sound);
    expect(file.header.get('ORIGINATOR')).toBe('bench "two"');
    expect(file.header.get('DESCRIPTOR')).toBe('card 7');
    expect(file.fields).toEqual(['SAMPLE_ID', 'SAMPLE_NAME', 'LAB_L', 'LAB_A', 'LAB_B']);
    expect(file.rows.map(({ line }) => line)).toEqual([10, 11]);
  });

  test('gives patches with their names and CIELAB', () => {
    expect(patchesFromCgats(sound)).toEqual([
      { id: 'dark skin', lab: [37.99, 13.56, 14.06] },
      { id: 'light skin', lab: [65.71, 18.13, 17.81] },
    ]);
  });

  test('turns XYZ to CIELAB: the white of CIE D50 is 100, 0, 0 (CIE 15)', () => {
    const text = sound
      .replace('LAB_L LAB_A LAB_B', 'XYZ_X XYZ_Y XYZ_Z')
      .replace('37.99 13.56 14.06', '96.422 100 82.521')
      .replace(/65\.71\s+18\.13 17\.81/, '17.357 18.001 14.855');
    const [white, grey] = patchesFromCgats(text);
    for (const i of [0, 1, 2]) expect(white!.lab[i]).toBeCloseTo([100, 0, 0][i]!, 9);
    // STANDARDS.md § 2: L* of 18 % is 49.5.
    expect(grey!.lab[0]).toBeCloseTo(49.5, 1);
    expect(Math.hypot(grey!.lab[1], grey!.lab[2])).toBeLessThan(0.02);
  });

  test.each([
    ['a word for a number', sound.replace('13.56', 'red'), /line 10, LAB_A is “red”/],
    ['a set cut short', sound.replace('  18.13 17.81\n', ''), /line 11, this set has 3 values/],
    ['a wrong count of sets', sound.replace('SETS 2', 'SETS 3'), /line 8, NUMBER_OF_SETS is 3/],
    ['a wrong count of fields', sound.replace('FIELDS 5', 'FIELDS 4'), /line 4, NUMBER_OF_FIELDS/],
    ['no end of the data', sound.replace('END_DATA\n', ''), /line 9, BEGIN_DATA has no END_DATA/],
    ['no data', sound.replace('BEGIN_DATA\n', ''), /BEGIN_DATA is missing/],
    ['a quote that does not end', sound.replace('"dark skin"', '"dark skin'), /line 10, a quoted/],
    ['no fields', sound.replace(/SAMPLE_ID.*\n/, ''), /no fields/],
    ['no colours', sound.replace('LAB_L LAB_A', 'LAB_X LAB_Y'), /neither LAB_L/],
    ['another illuminant', `${sound}ILLUMINATION_NAME D65\n`, /is for D65/],
    ['nothing', '', /line 1, BEGIN_DATA_FORMAT is missing/],
  ])('with %s is refused, the line named', (_, text, reason) => {
    expect(complaint(text)).toMatch(/^bad-cgats: /);
    expect(complaint(text)).toMatch(reason);
  });
});
