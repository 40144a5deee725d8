/**
 * The exact numbers behind the rounded labels of exposure times, apertures and sensitivities. Cameras time in powers of two and the
 * labels round them: 1/125 stands for 1/128 s, 0.093 EV from 1/120 (series of ISO 516 and common practice; check-values
 * `exposure_apex`). What is no label of a series is taken as it is.
 */
export type Division = 'third' | 'half';

/** Labels with their place in the series, in thirds of a stop from 1 s, or in half stops. */
type Label = readonly [label: number, place: number];

const thirdTimes: readonly Label[] = [
  ...[
    30,
    25,
    20,
    15,
    13,
    10,
    8,
    6,
    5,
    4,
    3.2,
    2.5,
    2,
    1.6,
    1.3,
    1,
    0.8,
    0.6,
    1 / 2,
    0.4,
    0.3,
    1 / 4,
  ],
  ...[5, 6, 8, 10, 13, 15, 20, 25, 30, 40, 50, 60, 80, 100, 125, 160, 200, 250, 320, 400].map(
    invert,
  ),
  ...[500, 640, 800, 1000, 1250, 1600, 2000, 2500, 3200, 4000, 5000, 6400, 8000].map(invert),
  ...[10_000, 12_800, 16_000, 20_000, 25_600, 32_000].map(invert),
].map((label, i) => [label, 15 - i]);
/** Other ways to write a label of the same place. */
const thirdTimesToo: readonly Label[] = [
  [1 / 1.3, -1],
  [1 / 1.6, -2],
  [1 / 2.5, -4],
  [1 / 3, -5],
];
const halfTimes: readonly Label[] = [
  ...[32, 22, 16, 11, 8, 6, 4, 3, 2, 1.5, 1, 0.7, 1 / 2, 0.3, 1 / 4, 1 / 6, 1 / 8, 1 / 10],
  ...[15, 20, 30, 45, 60, 90, 125, 180, 250, 350, 500, 750, 1000, 1500, 2000].map(invert),
  ...[3000, 4000, 6000, 8000].map(invert),
].map((label, i) => [label, 10 - i]);
const halfTimesToo: readonly Label[] = [
  [30, 10],
  [15, 8],
  [1 / 3, -3],
];
const thirdApertures: readonly Label[] = [
  1, 1.1, 1.2, 1.4, 1.6, 1.8, 2, 2.2, 2.5, 2.8, 3.2, 3.5, 4, 4.5, 5, 5.6, 6.3, 7.1, 8, 9, 10, 11,
  13, 14, 16, 18, 20, 22, 25, 29, 32,
].map((label, i) => [label, i]);
const halfApertures: readonly Label[] = [
  1, 1.2, 1.4, 1.7, 2, 2.4, 2.8, 3.3, 4, 4.8, 5.6, 6.7, 8, 9.5, 11, 13, 16, 19, 22, 27, 32,
].map((label, i) => [label, i]);
const thirdSpeeds: readonly Label[] = [
  50, 64, 80, 100, 125, 160, 200, 250, 320, 400, 500, 640, 800, 1000, 1250, 1600, 2000, 2500, 3200,
  4000, 5000, 6400, 8000, 10_000, 12_800, 16_000, 20_000, 25_600, 32_000, 40_000, 51_200,
].map((label, i) => [label, i - 3]);

/** How far metadata may be off a label, relative: 0.0167 for 1/60, not 1/124 for 1/125. */
const labelSlack = 0.004;

function invert(value: number): number {
  return 1 / value;
}

function placeOf(value: number, labels: readonly Label[]): number | null {
  const near = labels.find(([label]) => Math.abs(value / label - 1) < labelSlack);
  return near ? near[1] : null;
}

/** Half stops when a time or an aperture is told that only that series has, as 1/90 or f/6.7; else thirds. */
export function divisionOf(times: readonly number[], fNumbers: readonly number[] = []): Division {
  const onlyHalf = (value: number, half: readonly Label[], third: readonly Label[]) =>
    placeOf(value, half) !== null && placeOf(value, third) === null;
  const half =
    times.some((t) => onlyHalf(t, halfTimes, [...thirdTimes, ...thirdTimesToo])) ||
    fNumbers.some((n) => onlyHalf(n, halfApertures, thirdApertures));
  return half ? 'half' : 'third';
}

/** s → s: 1/125 → 1/128, 1/60 → 1/64, 30 → 32. */
export function exactTime(seconds: number, division: Division = 'third'): number {
  const labels =
    division === 'half' ? [...halfTimes, ...halfTimesToo] : [...thirdTimes, ...thirdTimesToo];
  const place = placeOf(seconds, labels);
  return place === null ? seconds : 2 ** (place / (division === 'half' ? 2 : 3));
}

/** 5.6 → 4√2, 11 → 8√2. Small compacts have apertures of their own, such as f/3.1: they stay. */
export function exactFNumber(fNumber: number, division: Division = 'third'): number {
  const place = placeOf(fNumber, division === 'half' ? halfApertures : thirdApertures);
  return place === null ? fNumber : 2 ** (place / (division === 'half' ? 4 : 6));
}

/** 125 → 126, 3200 stays. */
export function exactSpeed(iso: number): number {
  const place = placeOf(iso, thirdSpeeds);
  return place === null ? iso : 100 * 2 ** (place / 3);
}

/** The exposure time as a camera writes it: 1/125, 0.6, 2; s. */
export function timeLabel(seconds: number): string {
  const labels = [...thirdTimes, ...halfTimes];
  const near = labels.find(([label]) => Math.abs(seconds / label - 1) < labelSlack)?.[0] ?? seconds;
  if (near >= 0.26) return String(Number(near.toPrecision(2)));
  return `1/${Math.round(1 / near)}`;
}
