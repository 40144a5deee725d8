import { quantities } from '@/analysis/quantities';
import type { Plots, StationPlot } from '@/analysis/result';
import { targets } from '@/analysis/target/target';
import { withDoubt } from '@/lib/shared/numbers';
import type { ReportContent, RuleOutcome } from '@/lib/shared/report';
import { functionCheckItems } from '@/lib/shared/words';

/** An invented unit, by hand: every number here is made up to exercise the drawings. */
export const size = { width: 4000, height: 3000 };

const sharpness: Record<string, number> = {
  C: 0.31,
  N: 0.29,
  S: 0.28,
  W: 0.268,
  E: 0.26,
  NW: 0.24,
  NE: 0.236,
  SW: 0.223,
  SE: 0.171,
  'inner-NW': 0.286,
  'inner-NE': 0.281,
  'inner-SW': 0.279,
  'inner-SE': 0.262,
};

/** Closed form for a Gaussian blur behind a box pixel: only to have curves of a likely shape. */
export function responseOf(mtf50: number, frequency: number): number {
  return 0.5 ** ((frequency / mtf50) ** 1.7);
}
export const frequency = Array.from({ length: 33 }, (_, k) => k / 64);

export const stations: StationPlot[] = targets['4x3'].stations.map(({ id, x, y }) => {
  const scale = (size.height * 0.94) / 900;
  const cx = size.width / 2 + x * scale;
  const cy = size.height / 2 + y * scale;
  const mtf50 = sharpness[id] ?? 0.25;
  const corner = (dx: number, dy: number) => ({ x: cx + dx * 90, y: cy + dy * 90 });
  return {
    id,
    x: cx,
    y: cy,
    radius: 160,
    corners: [corner(-1, -1), corner(1, -1), corner(1, 1), corner(-1, 1)],
    curves: [
      {
        edge: 'vertical' as const,
        frequency,
        response: frequency.map((f) => responseOf(mtf50, f)),
      },
    ],
    mtf50,
    red: { x: x * 0.0012, y: y * 0.0012 },
    blue: { x: -x * 0.0016, y: -y * 0.0016 },
  };
});

export const colours: ReportContent['colours'] = targets['4x3'].discs
  .filter((disc) => disc.kind !== 'grey')
  .map((disc, index) => {
    const [L = 0, a = 0, b = 0] = disc.lab;
    const [red = 0, green = 0, blue = 0] = disc.srgb8;
    return {
      id: disc.id,
      kind: disc.kind,
      reference: [L, a, b],
      measured: [L - 2, a * 1.18 + Math.sin(index), b * 1.18 + Math.cos(index)],
      deltaE2000: 3 + Math.sin(index * 1.7) * 1.4,
      rgb: [red, green, blue],
    };
  });

export const tone: ReportContent['tone'] = targets['4x3'].discs
  .filter((disc) => disc.kind === 'grey')
  .map((disc) => {
    const reflectance = disc.reflectance ?? 0.18;
    return {
      reflectance,
      code: Math.min(1, (reflectance * 0.62) ** (1 / 2.2)),
      used: reflectance < 0.8,
    };
  });

const bell = (bin: number, at: number, wide: number) => Math.exp(-(((bin - at) / wide) ** 2));
const rawBins = Array.from(
  { length: 64 },
  (_, bin) => bell(bin, 24, 4) * 0.95 + bell(bin, 34, 9) * 0.35 + bell(bin, 12, 4) * 0.25,
);
const rawTotal = rawBins.reduce((sum, bin) => sum + bin, 0);
export const histogram = rawBins.map((bin) => bin / rawTotal);

export const shading: NonNullable<Plots['shading']> = {
  columns: 16,
  rows: 12,
  ev: Array.from({ length: 192 }, (_, index) => {
    const x = ((index % 16) - 7.5) / 8;
    const y = (Math.floor(index / 16) - 5.5) / 8;
    return -0.9 * (x * x + y * y) - 0.12 * (x + y);
  }),
};

interface RuleSeed {
  label: string;
  quantity: string;
  unit: string;
  value: number | null;
  expanded: number | null;
  low?: [number, number, number];
  high?: [number, number, number];
  scale: [number, number];
  standing: RuleOutcome['standing'];
  peers?: number[];
  sentence: string;
}

function rule(seed: RuleSeed, index: number): RuleOutcome {
  const letters = ['A', 'B', 'C'] as const;
  return {
    ruleId: `rule-${index}`,
    label: seed.label,
    quantity: seed.quantity,
    zone: null,
    edge: null,
    value: seed.value,
    unit: seed.unit,
    standardUncertainty: seed.expanded === null ? null : seed.expanded / 2,
    expanded: seed.expanded,
    degreesOfFreedom: 11,
    n: seed.value === null ? 0 : 3,
    limits: letters.map((letter, at) => ({
      letter,
      low: seed.low?.[at] ?? null,
      high: seed.high?.[at] ?? null,
    })),
    scale: { min: seed.scale[0], max: seed.scale[1] },
    allows: seed.standing === 'outside' ? 'B' : 'A',
    standing: seed.standing,
    margin: 0.2,
    sentence: seed.sentence,
    moreShots: seed.standing === 'doubt' ? 2 : null,
    effect: 'cap',
    peers: seed.peers ?? [],
  };
}

const seeds: RuleSeed[] = [
  {
    label: 'Exposure',
    quantity: 'exposure.bias',
    unit: 'EV',
    value: -0.68,
    expanded: 0.06,
    low: [-0.4, -0.9, -1.2],
    high: [0.4, 0.6, 0.9],
    scale: [-1.4, 1],
    standing: 'outside',
    peers: [-0.6, -0.55, -0.7, -0.4, -0.62, -0.5],
    sentence: 'Two thirds of a stop dark: a B at best.',
  },
  {
    label: 'Sharpness, middle',
    quantity: 'sharpness.lwph',
    unit: 'LW/PH',
    value: 1860,
    expanded: 30,
    low: [1550, 1350, 1100],
    scale: [900, 2100],
    standing: 'within',
    peers: [1650, 1700, 1760, 1600, 1690],
    sentence: 'Sharper than most of its kind.',
  },
  {
    label: 'Worst corner to middle',
    quantity: 'sharpness.cornerRatio',
    unit: '%',
    value: 55,
    expanded: 4,
    low: [70, 55, 40],
    scale: [30, 100],
    standing: 'doubt',
    peers: [66, 70, 72, 64, 69],
    sentence: 'Two more shots of the target would settle it.',
  },
  {
    label: 'Colour fringing, corners',
    quantity: 'fringe.red',
    unit: 'px',
    value: 1.1,
    expanded: 0.1,
    high: [1.4, 2, 2.6],
    scale: [0, 3],
    standing: 'within',
    peers: [1, 1.2, 0.9, 1.1],
    sentence: 'About one pixel in the corners.',
  },
  {
    label: 'Saturation',
    quantity: 'colour.saturation',
    unit: '%',
    value: 118,
    expanded: 1,
    low: [85, 75, 65],
    high: [125, 135, 142],
    scale: [60, 150],
    standing: 'within',
    peers: [117, 119, 121, 116],
    sentence: 'Lively, the same in every hue.',
  },
  {
    label: 'Signal to noise',
    quantity: 'noise.snr',
    unit: 'dB',
    value: 36.1,
    expanded: 0.3,
    low: [32, 28, 24],
    scale: [20, 44],
    standing: 'within',
    sentence: 'Clean at its lowest sensitivity.',
  },
  {
    label: 'Light in the corners',
    quantity: 'shading.corner',
    unit: 'EV',
    value: null,
    expanded: null,
    low: [-0.8, -1.2, -1.8],
    scale: [-2, 0.2],
    standing: 'untested',
    sentence: 'Not tested.',
  },
  {
    label: 'Distortion',
    quantity: 'distortion.corner',
    unit: '%',
    value: -1.2,
    expanded: 0.05,
    low: [-2, -3.5, -5],
    high: [2, 3.5, 5],
    scale: [-6, 6],
    standing: 'within',
    sentence: 'Slightly barrel-shaped.',
  },
];

export const rules = [...seeds, ...seeds.slice(1, 5)].map(rule);

/** Numbers that no rule judges, to fill the list as a real run does. */
const alsoMeasured: ReportContent['measurements'] = [...quantities.values()]
  .slice(2, 24)
  .filter(({ name }) => name !== 'colour.saturation')
  .map(({ name, label, source, unit, decimals }, index) => ({
    name,
    zone: null,
    label,
    source,
    text: withDoubt(index * 1.7 - 6, 0.1, unit, decimals),
    value: index * 1.7 - 6,
    expanded: 0.1,
    unit,
    n: 3,
  }));

const hash = (digit: string) => digit.repeat(64);

export const content: ReportContent = {
  format: 'mendlight-report',
  formatVersion: 1,
  slug: 'ml-0042-k7qd',
  version: 1,
  publishedAt: '2026-03-14T15:20:31.004Z',
  shop: { name: 'Quayside Camera Repair' },
  unit: {
    tag: 'ML-0042',
    maker: 'Halvard Optik',
    model: 'P5',
    modelClass: 'small-sensor compact',
    serialEnding: '7K31',
    accessories: ['battery', 'charger', 'wrist strap'],
  },
  grade: {
    letter: 'B',
    overridden: false,
    reason: null,
    signedByBenchWorker: false,
    schemeName: 'Small compacts',
    schemeVersion: 3,
  },
  headline: 'Takes good pictures in the middle; softer and colour-fringed at the edges',
  summary:
    'A sound camera for its class. Automatic exposure runs about two thirds of a stop dark, so set compensation to +0.7. Everything the hand can operate was tried and works.',
  good: [
    {
      standing: 'within',
      title: 'Colours are lively and even.',
      text: '18 % above neutral, the same in every hue.',
    },
    {
      standing: 'within',
      title: 'Clean at low light settings.',
      text: '36 dB at the lowest sensitivity, better than most of its kind.',
    },
    {
      standing: 'within',
      title: 'Straight lines stay straight.',
      text: 'About one per cent barrel distortion in the corners.',
    },
  ],
  weak: [
    {
      standing: 'outside',
      title: 'Dark exposures.',
      text: 'Two thirds of a stop under. Set compensation to +0.7.',
    },
    {
      standing: 'doubt',
      title: 'Lower right corner soft.',
      text: '55 % of the middle. Compose with the subject away from it, or close the aperture.',
    },
    {
      standing: 'within',
      title: 'Colour fringes towards the edges.',
      text: 'About one pixel in the corners: visible in large prints.',
    },
  ],
  repair: {
    fault: 'Display stays dark; the camera switches on and takes pictures.',
    work: [
      'Backlight checked with a lamp: an image is there, so the panel drives but is not lit.',
      'Flat cable found cracked at the hinge; display assembly replaced.',
      'Menus and live view tried for an hour with the new display.',
    ],
    parts: ['Display assembly, same part as the old one: compared'],
  },
  checks: functionCheckItems.map(({ id, label }) => ({
    label,
    outcome: id === 'flash' ? 'fail' : id === 'viewfinder' ? 'not-fitted' : 'pass',
    note: id === 'flash' ? 'fires, but only at full power' : id === 'display' ? 'new' : null,
  })),
  rules,
  measurements: [
    {
      name: 'exposure.bias',
      zone: null,
      label: 'Exposure',
      source: 'ISO 12232',
      text: '−0.68 ± 0.06 EV',
      value: -0.68,
      expanded: 0.06,
      unit: 'EV',
      n: 3,
    },
    {
      name: 'sharpness.mtf50',
      zone: 'centre',
      label: 'Sharpness, middle',
      source: 'ISO 12233',
      text: '0.310 ± 0.005 cy/px',
      value: 0.31,
      expanded: 0.005,
      unit: 'cy/px',
      n: 3,
    },
    {
      name: 'colour.error',
      zone: null,
      label: 'Colour error',
      source: 'ISO/CIE 11664-6',
      text: '3.1 ± 0.2 ΔE00',
      value: 3.1,
      expanded: 0.2,
      unit: 'ΔE00',
      n: 3,
    },
    ...alsoMeasured,
  ],
  frame: {
    ...size,
    fullCircle: 0.312,
    fullCircleMeans: 'peers',
    stations: stations.map(({ id, x, y, mtf50, red, blue }) => ({
      id,
      x,
      y,
      mtf50,
      red,
      blue,
      weak: id === 'SE',
    })),
  },
  curves: [
    {
      label: 'middle',
      weak: false,
      frequency,
      response: frequency.map((f) => responseOf(0.31, f)),
    },
    {
      label: 'lower right',
      weak: true,
      frequency,
      response: frequency.map((f) => responseOf(0.171, f)),
    },
    {
      label: 'corners',
      weak: false,
      frequency,
      response: frequency.map((f) => responseOf(0.218, f)),
    },
  ],
  tone,
  colours,
  histogram,
  pictures: [
    {
      name: 'view',
      label: 'The test target as this camera saw it',
      width: 1200,
      height: 900,
      alt: 'The printed test target',
    },
    {
      name: 'middle',
      label: 'Middle',
      width: 300,
      height: 300,
      alt: 'A dark square on grey from the middle of the picture, at full size',
    },
    {
      name: 'weakest-corner',
      label: 'Weakest corner, lower right',
      width: 300,
      height: 300,
      alt: 'The same square in the lower right corner, at full size',
    },
  ],
  capture: {
    testedOn: '2026-03-14',
    shots: 24,
    targetShots: 3,
    settings: 'wide end, f/4.0, ISO 100, daylight balance, self-timer on a tripod',
    print: 'Target 4x3, nominal colours',
  },
  originals: [
    { name: 'IMG_0107.JPG', sha256: hash('a'), bytes: 4_812_331 },
    { name: 'IMG_0108.JPG', sha256: hash('7'), bytes: 4_790_004 },
    { name: 'IMG_0109.JPG', sha256: hash('0'), bytes: 4_801_777 },
  ],
  cautions: [
    'The battery is the camera’s original and may hold less than when new.',
    'The flash was not opened; a flash capacitor can hold some 300 V for days.',
  ],
  analysisVersion: '1.0.0',
};

/** The same page at its limits: long names, no weak points, no frame, parts only, many failed checks. */
export const extreme: ReportContent = {
  ...content,
  unit: {
    ...content.unit,
    maker: 'Vereinigte Feinmechanische Werkstätten Łódź',
    model: 'Superpanorama Reflex Automatic 2000 Professional',
    modelClass: 'interchangeable-lens camera',
    accessories: [],
  },
  grade: {
    ...content.grade,
    letter: 'Parts',
    overridden: true,
    reason: 'The lens mount is bent, which none of the rules sees.',
    signedByBenchWorker: true,
  },
  good: [],
  weak: [],
  frame: null,
  curves: [],
  colours: [],
  tone: [],
  pictures: [],
  rules: Array.from({ length: 30 }, (_, index) => ({
    ...rule(seeds[index % seeds.length] as RuleSeed, index),
    label: `Rule ${index + 1} with a rather long name that has to wrap somewhere`,
  })),
  checks: content.checks.map((check) => ({ ...check, outcome: 'fail' as const })),
  repair: { ...content.repair, work: [], parts: [] },
  cautions: [],
};
