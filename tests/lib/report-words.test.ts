import { describe, expect, test } from 'vitest';
import type { Evidence } from '@/lib/shared/grading/evidence';
import { propose } from '@/lib/shared/grading/propose';
import { defaultSchemes } from '@/lib/shared/grading/schemes';
import {
  goodFirst,
  headlines,
  type TopicId,
  type TopicWords,
  topics,
  unsaidBeside,
} from '@/lib/shared/report-topics';
import { reportWords, type WordFacts } from '@/lib/shared/report-words';
import { functionCheckItems } from '@/lib/shared/words';

const scheme = defaultSchemes['small-sensor-compact'];

/** In the middle of A, so that nothing is weak. */
const ideal: Record<string, number> = {
  'exposure.bias': 0,
  'clip.highlights': 0.2,
  'colour.error': 2.5,
  'colour.saturation': 102,
  'white.error': 1.5,
  'sharpness.mtf50': 0.3,
  'sharpness.cornerRatio': 88,
  'sharpness.asymmetry': 6,
  'fringe.red': 0.2,
  'fringe.blue': -0.1,
  'fringe.shift': 0.04,
  'noise.snr': 40,
  'shading.corner': -0.2,
  'shading.asymmetry': 0.05,
  'distortion.corner': -0.4,
};

type Outcome = 'pass' | 'fail' | 'not-fitted';

function factsOf(
  values: Record<string, number>,
  {
    outcomes = {},
    unchecked = 0,
    peers = [],
  }: { outcomes?: Record<string, Outcome>; unchecked?: number; peers?: number[] } = {},
): WordFacts {
  const all = { ...ideal, ...values };
  const made = functionCheckItems.slice(unchecked);
  const evidence: Evidence = {
    measured: (quantity) => {
      const value = all[quantity];
      return value === undefined ? null : [{ value, uncertainty: 0.002 }];
    },
    peers: () => peers,
    checks: new Map(made.map((item) => [item.id, outcomes[item.id] ?? 'pass'])),
  };
  const { letter, rules } = propose(scheme, evidence);
  return {
    letter,
    rules,
    checks: made.map((item) => ({
      label: item.label,
      outcome: outcomes[item.id] ?? 'pass',
      note: null,
    })),
    unchecked,
    weakest: { station: 'SE', share: 0.58 },
  };
}
const wordsOf = (values: Record<string, number>, more?: Parameters<typeof factsOf>[1]) =>
  reportWords(factsOf(values, more));

// The buyer's sentences of product.md and design/report.html, from the numbers that stand there.
test('a camera that runs two thirds of a stop dark is told so, with what to do', () => {
  const { headline, summary, weak } = wordsOf({ 'exposure.bias': -0.68 });
  expect(headline).toBe('Takes good pictures once its exposure is set right');
  expect(summary).toBe(
    'A sound camera for its class. Automatic exposure runs about two thirds of a stop dark, so set compensation to +0.7. Everything the hand can operate was tried and works.',
  );
  expect(weak[0]).toEqual({
    standing: 'outside',
    title: 'Dark exposures.',
    text: 'Two thirds of a stop under. Set compensation to +0.7.',
  });
});

test('a lens that is soft and fringed outside gets the headline that says where it is good', () => {
  const { headline, weak } = wordsOf({ 'sharpness.cornerRatio': 45, 'fringe.red': 1.8 });
  expect(headline).toBe(
    'Takes good pictures in the middle; softer and colour-fringed at the edges',
  );
  expect(weak.map((point) => point.title)).toEqual([
    'Soft corners.',
    'Colour fringes towards the edges.',
  ]);
});

test('a corner that is softer than the others is named, with its share of the middle', () => {
  const { headline, weak } = wordsOf({ 'sharpness.asymmetry': 50 });
  expect(headline).toBe('Sharp in the middle; one corner is softer than the others');
  expect(weak[0]).toEqual({
    standing: 'outside',
    title: 'Lower right corner soft.',
    text: '58\u00a0% of the middle. Compose with the subject away from it, or close the aperture.',
  });
});

test('a camera without weakness gets three good things and no invented weak ones', () => {
  const { headline, summary, good, weak } = wordsOf({});
  expect(headline).toBe('Takes good pictures, sharp into the corners');
  expect(summary).toMatch(/^In very good order for its class\. Everything/);
  expect(good).toHaveLength(3);
  expect(weak).toEqual([]);
});

/** A value for each side on which a topic can be worth knowing. */
const sides: [TopicId, 'low' | 'high', Record<string, number>][] = [
  ['exposure', 'low', { 'exposure.bias': -0.7 }],
  ['exposure', 'high', { 'exposure.bias': 0.6 }],
  ['highlights', 'high', { 'clip.highlights': 4 }],
  ['colour', 'high', { 'colour.error': 8 }],
  ['saturation', 'low', { 'colour.saturation': 74 }],
  ['saturation', 'high', { 'colour.saturation': 130 }],
  ['white', 'high', { 'white.error': 8 }],
  ['sharpness', 'low', { 'sharpness.mtf50': 0.15 }],
  ['corners', 'low', { 'sharpness.cornerRatio': 55 }],
  ['evenness', 'high', { 'sharpness.asymmetry': 30 }],
  ['fringes', 'low', { 'fringe.red': -1.7 }],
  ['fringes', 'high', { 'fringe.blue': 1.7 }],
  ['shift', 'high', { 'fringe.shift': 0.42 }],
  ['noise', 'low', { 'noise.snr': 27 }],
  ['light', 'low', { 'shading.corner': -1.2 }],
  ['light', 'high', { 'shading.corner': 0.5 }],
  ['lightEvenness', 'high', { 'shading.asymmetry': 0.4 }],
  ['geometry', 'low', { 'distortion.corner': -4.5 }],
  ['geometry', 'high', { 'distortion.corner': 4.5 }],
];

const heading = (template: string) => template.replace('{corner}', 'Lower right');

describe('every topic', () => {
  test.each(sides)(
    '%s, %s: is said as weak, in its own words, with every place filled',
    (id, side, values) => {
      const { weak } = wordsOf(values);
      const words: TopicWords = topics[id];
      expect(weak[0]?.title).toBe(heading(words[side]!.title));
      expect(weak[0]?.standing).toBe('outside');
      expect(weak[0]?.text).not.toMatch(/[{}]|undefined|NaN/);
    },
  );

  test('has a test for each side that it has words for', () => {
    const tested = sides.map(([id, side]) => `${id} ${side}`);
    const spoken = Object.entries<TopicWords>(topics).flatMap(([id, words]) =>
      (['low', 'high'] as const).filter((side) => words[side]).map((side) => `${id} ${side}`),
    );
    expect(tested.toSorted()).toEqual(spoken.toSorted());
  });

  test.each(Object.keys(topics) as TopicId[])('%s is said as good when it is the best', (id) => {
    // Everything else in its weakest, but for what would silence it.
    const others = sides.filter(([other]) => other !== id && !unsaidBeside[id]?.includes(other));
    const bad = Object.assign({}, ...others.map(([, , v]) => v));
    const { good } = wordsOf(bad);
    expect(good.map((point) => point.title)).toContain(topics[id].good.title);
    for (const point of good) expect(point.text).not.toMatch(/[{}]|undefined|NaN/);
  });

  test('is judged by a rule of every scheme', () => {
    const told = Object.values<TopicWords>(topics).flatMap((words) => words.quantities);
    for (const { rules } of Object.values(defaultSchemes)) {
      const judged = rules.flatMap((rule) => (rule.of === 'measurement' ? rule.quantity : []));
      expect(new Set(judged)).toEqual(new Set(told));
    }
  });
});

test.each(headlines.filter((line) => line.weak).map((line) => [line.text, line.weak!] as const))(
  'the headline “%s” is reached by its own weaknesses alone',
  (text, weak) => {
    const chosen = weak.map((id) => sides.find(([other]) => other === id)![2]);
    expect(wordsOf(Object.assign({}, ...chosen)).headline).toBe(text);
  },
);

test('a camera for parts says so first', () => {
  const { headline, summary } = wordsOf({}, { outcomes: { display: 'fail' } });
  expect(headline).toBe('For parts or repair, not sold as a working camera');
  expect(summary).toContain('Not working: display.');
});

test.each([
  ['all pass', {}, 'Everything the hand can operate was tried and works.'],
  [
    'one is not fitted',
    { outcomes: { viewfinder: 'not-fitted' } },
    'Everything the hand can operate was tried and works.',
  ],
  ['two fail', { outcomes: { flash: 'fail', ports: 'fail' } }, 'Not working: flash and ports.'],
  ['one was not tried', { unchecked: 1 }, 'What was tried works. 1 function was not tried.'],
  ['none was tried', { unchecked: 15 }, 'Its functions were not tried.'],
] as const)('function checks in the summary when %s', (_, more, sentence) => {
  expect(wordsOf({}, more).summary).toContain(sentence);
});

test('peers are mentioned only when there are three and this camera beats most of them', () => {
  const noise = (peers: number[]) =>
    wordsOf(Object.assign({}, ...sides.filter(([id]) => id !== 'noise').map(([, , v]) => v)), {
      peers,
    }).good.find((point) => point.title === 'Clean pictures.')?.text;
  const plain = 'Skies and skin stay smooth: 40.0\u00a0dB in mid grey';
  expect(noise([31, 33, 35])).toBe(`${plain}, better than most others of this model.`);
  expect(noise([31, 33])).toBe(`${plain}.`);
  expect(noise([41, 43, 35])).toBe(`${plain}.`);
});

test.each([
  [0.5, 'hardly visible'],
  [1.2, 'visible in large prints'],
  [1.8, 'visible at full size on a screen'],
])('a fringe of %d px is %s', (pixels, words) => {
  const { weak, good } = wordsOf({ 'fringe.red': pixels, 'fringe.blue': 0.1 });
  const told = [...weak, ...good].find((point) => point.title.startsWith('Colour fringes'));
  // Half a pixel is within A with room to spare, so it isn't told as weak at all.
  if (pixels === 0.5) expect(told).toBeUndefined();
  else expect(told?.text).toContain(words);
});

test('a soft corner is never called sharp in the same breath, and nothing is nought', () => {
  const { good } = wordsOf({ 'sharpness.asymmetry': 50, 'exposure.bias': 0 });
  expect(good.map((point) => point.title)).toEqual([
    'Sharp in the middle.',
    'Exposure is right.',
    'Colours are true.',
  ]);
  expect(good[1]?.text).toContain(`less than 0.01\u00a0EV`);
});

test('dark corners and bowed lines are told of a good camera too, as within', () => {
  const { weak } = wordsOf({ 'shading.corner': -0.45, 'distortion.corner': -1.45 });
  expect(weak.map(({ title, standing }) => [title, standing])).toEqual([
    ['Dark corners.', 'within'],
    ['Lines bow outward.', 'within'],
  ]);
});

test('every topic has its rank among the good', () => {
  expect(goodFirst.toSorted()).toEqual(Object.keys(topics).toSorted());
});

test('no more than three weak points, the worst first', () => {
  const { weak } = wordsOf({
    'exposure.bias': -0.7,
    'colour.error': 12.5,
    'noise.snr': 27,
    'white.error': 8,
  });
  expect(weak).toHaveLength(3);
  expect(weak[0]?.title).toBe('Colours are off.');
});
