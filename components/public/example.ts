import { targets } from '@/analysis/target/target';
import type { FramePicture } from '@/lib/shared/report';
import type { ScaleData } from '../pictures/scale-line';

/** Invented numbers, shown on the landing page as an example and marked as one. */
const shares: Readonly<Record<string, number>> = {
  C: 0.98,
  N: 0.93,
  S: 0.9,
  W: 0.86,
  E: 0.84,
  NW: 0.78,
  NE: 0.76,
  SW: 0.72,
  SE: 0.55,
  'inner-NW': 0.92,
  'inner-NE': 0.9,
  'inner-SW': 0.9,
  'inner-SE': 0.84,
};
const fullCircle = 0.3;
const width = 1200;
const height = 900;

export const exampleFrame: FramePicture = {
  width,
  height,
  fullCircle,
  fullCircleMeans: 'peers',
  stations: targets['4x3'].stations.map(({ id, x, y }) => ({
    id,
    x: width / 2 + x * 0.96,
    y: height / 2 + y * 0.96,
    mtf50: (shares[id] ?? 0.8) * fullCircle,
    red: { x: x * 0.00034, y: y * 0.00034 },
    blue: { x: -x * 0.00048, y: -y * 0.00048 },
    weak: id === 'SE',
  })),
};

const limits = (low: number[], high: number[] = []): ScaleData['limits'] =>
  (['A', 'B', 'C'] as const).map((letter, at) => ({
    letter,
    low: low[at] ?? null,
    high: high[at] ?? null,
  }));

export const exampleScales: (ScaleData & { text: string; source: string })[] = [
  {
    label: 'Exposure',
    source: 'ISO 12232',
    text: '−0.68 ± 0.06\u00a0EV',
    unit: 'EV',
    value: -0.68,
    expanded: 0.06,
    limits: limits([-0.4, -0.9, -1.2]),
    scale: { min: -1.4, max: 0.6 },
    peers: [-0.6, -0.55, -0.7, -0.4, -0.62, -0.5],
    standing: 'outside',
  },
  {
    label: 'Sharpness, middle',
    source: 'ISO 12233',
    text: '1720 ± 30\u00a0LW/PH',
    unit: 'LW/PH',
    value: 1720,
    expanded: 30,
    limits: limits([1550, 1350, 1100]),
    scale: { min: 900, max: 2100 },
    peers: [1650, 1700, 1760, 1600, 1690],
    standing: 'within',
  },
  {
    label: 'Worst corner to middle',
    source: 'ISO 12233',
    text: '56 ± 4\u00a0%',
    unit: '%',
    value: 56,
    expanded: 4,
    limits: limits([70, 55, 40]),
    scale: { min: 30, max: 100 },
    peers: [66, 70, 72, 64, 69],
    standing: 'doubt',
  },
  {
    label: 'Saturation',
    source: 'CIE 15',
    text: '118 ± 1\u00a0%',
    unit: '%',
    value: 118,
    expanded: 1,
    limits: limits([], [125, 135, 142]),
    scale: { min: 80, max: 150 },
    peers: [117, 119, 121, 116],
    standing: 'within',
  },
];

export const exampleRules = [
  'Sharpness, middle',
  'Sharpness, partway',
  'Saturation',
  'Hue',
  'Worst corner to middle',
  'Colour fringing',
  'White balance',
  'Exposure',
  'Signal to noise',
  'Light in the corners',
  'Distortion',
  'Function checks',
].map((label) => ({
  label,
  standing:
    label === 'Exposure'
      ? ('outside' as const)
      : label === 'Worst corner to middle'
        ? ('doubt' as const)
        : ('within' as const),
}));
