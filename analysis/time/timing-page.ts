import page from './timing-page.json' with { type: 'json' };

/**
 * The timing page: what `/lag` shows and `read-timing-page.ts` reads. Lengths in page units, 1/1000 of the page's side, origin
 * at its centre, x right, y down; angles clockwise from the top.
 *
 * - Four rings in the corners give the page's place in the photograph.
 * - The hand, a disc on a circle, goes round once a cycle; elapsed time counts from its passing the mark at the top.
 * - Frame bits: the number of the screen's frame since the mark in Gray code, each bit as two discs, one lit and one dark. From
 *   one frame to the next one bit turns, so a photograph that holds both frames leaves that bit alone half lit; and as one disc of
 *   two is always lit, neither exposure nor the screen's brightness matters.
 * - Screen bits: the time of a frame in steps of 0.01 ms, and a checksum, which also tells which way up the page is.
 */
export const timingPage = page;

/** Where discs stand on a circle of the page, `index` of `count` clockwise from the top. */
export function onCircle(radius: number, index: number, count: number): { x: number; y: number } {
  const angle = (2 * Math.PI * index) / count;
  return { x: radius * Math.sin(angle), y: -radius * Math.cos(angle) };
}

/** The two discs of a frame bit: lit when it is 1, lit when it is 0. */
export function frameBitDiscs(bit: number): readonly [number, number] {
  return [2 * bit, 2 * bit + 1];
}

/** Frames of a cycle: even, so that the stretch from the middle of the Gray code closes with one bit as well. */
export function cycleFrames(frameTime: number): number {
  return 2 * Math.round(page.cycleMilliseconds / frameTime / 2);
}

/** Frame time that the page can show: at least so that a cycle has no more frames than the code, at most what the steps reach. */
export const frameTimeRange = {
  shortest: page.cycleMilliseconds / 2 ** page.frameBits.count + 0.02,
  longest: page.screenStep * (2 ** (page.screenBits.count - page.screenBits.check) - 1),
} as const;

/**
 * Gray code of a frame since the mark, lowest bit first. The cycle takes the stretch round the middle of the reflected code,
 * whose two ends differ in the highest bit alone (F. Gray, US patent 2632058, 1953).
 */
export function frameBits(frame: number, frames: number): number[] {
  const all = 2 ** page.frameBits.count;
  const number = (all - frames) / 2 + (((frame % frames) + frames) % frames);
  const gray = number ^ (number >> 1);
  return Array.from({ length: page.frameBits.count }, (_, bit) => (gray >> bit) & 1);
}

/** The frame time and its checksum, lowest bit first. */
export function screenBits(frameTime: number): number[] {
  const steps = Math.round(frameTime / page.screenStep);
  const { count, check } = page.screenBits;
  const word = steps | (checksum(steps) << (count - check));
  return Array.from({ length: count }, (_, bit) => (word >> bit) & 1);
}

/** The frame time in ms, or null when the checksum is wrong or no screen has such a time. */
export function readScreenBits(bits: readonly number[]): number | null {
  const { count, check } = page.screenBits;
  const word = bits.reduce((sum, bit, i) => sum + bit * 2 ** i, 0);
  const steps = word % 2 ** (count - check);
  const frameTime = steps * page.screenStep;
  if (word >> (count - check) !== checksum(steps)) return null;
  return frameTime >= frameTimeRange.shortest ? frameTime : null;
}

/** CRC-8 with the polynomial x⁸ + x² + x + 1 over 16 bits, begun at 0xff so that an empty page fails. */
function checksum(value: number): number {
  let crc = 0xff;
  for (const byte of [value >> 8, value & 0xff]) {
    crc ^= byte;
    for (let i = 0; i < 8; i++) crc = crc & 0x80 ? ((crc << 1) ^ 0x07) & 0xff : (crc << 1) & 0xff;
  }
  return crc;
}
