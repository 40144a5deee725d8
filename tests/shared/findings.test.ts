import { describe, expect, test } from 'vitest';
import {
  colourFinding,
  doubtSentence,
  edgeFinding,
  exposureFinding,
  findings,
  fringeFinding,
  gradeFinding,
  type Reading,
  sharpnessFinding,
  shotHeadline,
  stationSharpness,
  stopsInWords,
  whiteFinding,
} from '@/lib/shared/findings';
import { gap } from '@/lib/shared/numbers';
import type { RuleOutcome } from '@/lib/shared/report';

const reading = (name: string, value: number, zone: string | null = null): Reading => ({
  name,
  zone,
  value,
  expanded: 0.06,
});
const corners = (c: number, nw: number, ne: number, sw: number, se: number) =>
  Object.entries({ C: c, NW: nw, NE: ne, SW: sw, SE: se }).map(([zone, value]) =>
    reading('sharpness.mtf50', value, zone),
  );

// Common practice, no source: cameras are set in thirds of a stop, so the words go by thirds.
test.each([
  [0.1, ''],
  [0.34, 'A third of a stop'],
  [-0.68, 'Two thirds of a stop'],
  [1.02, 'One stop'],
  [-1.36, 'One stop and a third'],
  [2.6, 'Two stops and two thirds'],
  [3.4, 'More than three stops'],
])('%d EV reads "%s"', (ev, words) => expect(stopsInWords(ev)).toBe(words));

describe('exposure', () => {
  test('names the direction, the number with its doubt and the remedy', () => {
    const finding = exposureFinding([reading('exposure.bias', -0.68)]);
    expect(finding?.title).toBe('Two thirds of a stop dark');
    expect(finding?.detail).toBe(`−0.68 ± 0.06${gap}EV. Compensation of +0.7 would put it right.`);
    expect(finding?.look).toBe(true);
  });
  test('over-exposure is bright and its remedy negative', () => {
    const finding = exposureFinding([reading('exposure.bias', 1)]);
    expect(finding?.title).toBe('One stop bright');
    expect(finding?.detail).toContain('−1.0');
  });
  test('within a sixth of a stop it is right', () => {
    expect(exposureFinding([reading('exposure.bias', 0.16)])?.title).toBe('Exposure is right');
  });
  test('says nothing when it was not measured', () => {
    expect(exposureFinding([reading('exposure.median', -1)])).toBeNull();
  });
});

describe('sharpness', () => {
  // Truth by construction: 0.174 / 0.300 = 0.58, so 42 % are lost.
  test('one soft corner is named with its loss against the middle', () => {
    const finding = sharpnessFinding(corners(0.3, 0.25, 0.25, 0.25, 0.174));
    expect(finding?.title).toBe(`The lower right corner is 42${gap}% softer`);
    expect(finding?.look).toBe(true);
  });
  // Truth: 1 − 0.205 / 0.300 = 31.7 %.
  test('four corners that fall off alike are said to be even', () => {
    const finding = sharpnessFinding(corners(0.3, 0.2, 0.21, 0.2, 0.21));
    expect(finding?.title).toBe(`The corners are 32${gap}% softer, evenly`);
  });
  test('corners near the middle are sharp', () => {
    expect(sharpnessFinding(corners(0.3, 0.28, 0.29, 0.28, 0.27))?.title).toBe(
      'Sharp into the corners',
    );
  });
  test('a middle softer than the corners points at the focus', () => {
    expect(sharpnessFinding(corners(0.2, 0.3, 0.3, 0.29, 0.3))?.title).toBe(
      'The middle is softer than the corners',
    );
  });
  test('a lone soft corner leaves the others their due', () => {
    expect(sharpnessFinding(corners(0.3, 0.3, 0.3, 0.3, 0.15))?.detail).toContain('lose nothing');
  });
  test('edges are told by where half the contrast is left, in the middle and in the weakest corner', () => {
    const finding = edgeFinding(corners(0.3, 0.25, 0.26, 0.25, 0.174));
    expect(finding?.title).toBe(`Half the contrast is left at 0.30${gap}cycles per pixel`);
    expect(finding?.detail).toBe(
      'At 0.300 in the middle; in the weakest corner, lower right, at 0.174.',
    );
    expect(edgeFinding([reading('sharpness.mtf50', 0.2, 'NW')])).toBeNull();
  });
  // Truth: √(0.1 · 0.4) = 0.2.
  test('a station takes the geometric mean of its edges', () => {
    const [station] = stationSharpness([
      reading('sharpness.mtf50', 0.1, 'C'),
      reading('sharpness.mtf50', 0.4, 'C'),
    ]);
    expect(station?.mtf50).toBeCloseTo(0.2, 12);
  });
  test('says nothing without a middle', () => {
    expect(sharpnessFinding([reading('sharpness.mtf50', 0.2, 'NW')])).toBeNull();
  });
});

describe('colour', () => {
  test('strong and even', () => {
    const finding = colourFinding([reading('colour.saturation', 118), reading('colour.hue', 2)]);
    expect(finding?.title).toBe(`Colours 18${gap}% strong, evenly`);
  });
  test('weak and uneven wants a look', () => {
    const finding = colourFinding([reading('colour.saturation', 90), reading('colour.hue', 9)]);
    expect(finding).toMatchObject({ title: `Colours 10${gap}% weak, unevenly`, look: true });
  });
  test('right in strength but turned in hue', () => {
    const finding = colourFinding([reading('colour.saturation', 101), reading('colour.hue', 7.4)]);
    expect(finding?.title).toBe('Hues shifted by 7°');
  });
  test('the larger fringe is the headline', () => {
    const finding = fringeFinding([
      reading('fringe.red', 0.4, 'corners'),
      reading('fringe.blue', -1.24, 'corners'),
    ]);
    expect(finding?.title).toBe(`Blue fringes of 1.2${gap}px in the corners`);
  });
  // Source: CIE 15, CIELAB: +a* is towards magenta-red, −a* green, +b* yellow, −b* blue.
  test.each([
    [0, 6, 'yellow'],
    [1, -6, 'blue'],
    [6, 1, 'magenta'],
    [-6, 1, 'green'],
  ])('greys at a* %d, b* %d lean to %s', (a, b, word) => {
    const finding = whiteFinding([
      reading('white.error', Math.hypot(a, b)),
      reading('white.a', a),
      reading('white.b', b),
    ]);
    expect(finding?.title).toBe(`Greys lean to ${word}`);
  });
});

describe('grade', () => {
  const proposal = { schemeName: 's', schemeVersion: 1, rules: [], inDoubt: 0, untested: 0 };
  test.each([
    ['A', 'So far this is an A'],
    ['B', 'So far this is a B'],
    ['Parts', 'So far this is for parts only'],
  ] as const)('%s reads "%s"', (letter, title) =>
    expect(gradeFinding({ ...proposal, letter, sentence: 'x' }).title).toBe(title),
  );
  test('nothing measured is no grade', () => {
    expect(gradeFinding(null).title).toBe('No grade yet');
  });
  test('a doubt says how many shots would settle it', () => {
    const rule = { label: 'Corners to middle', moreShots: 2 } as RuleOutcome;
    expect(doubtSentence(rule)).toBe(
      'Corners to middle is in doubt: two more shots of the target would settle it.',
    );
  });
});

test('what wants a look comes first', () => {
  const all = findings([...corners(0.3, 0.29, 0.29, 0.29, 0.29), reading('exposure.bias', -1)]);
  expect(all.map((f) => f.look)).toEqual([true, false]);
});

test('a shot’s headline is its worst finding, or that nothing stands out', () => {
  const metric = (value: number) => ({
    name: 'exposure.bias',
    value,
    unit: 'EV',
    uncertainty: 0.02,
  });
  expect(shotHeadline([metric(-0.7)])).toBe('Two thirds of a stop dark');
  expect(shotHeadline([metric(0)])).toBe('Nothing stands out');
  expect(shotHeadline([])).toBeNull();
});
