import { describe, expect, test } from 'vitest';
import {
  cycleFrames,
  frameBits,
  frameTimeRange,
  readScreenBits,
  screenBits,
  timingPage,
} from '@/analysis/time/timing-page';
import { measureScreen } from '@/components/lag/frame-time';

const frameTimes = [4.17, 6.94, 8.33, 11.11, 13.33, 16.67, 16.68, 20, 33.33, 40];

// Truth: the defining property of a Gray code (F. Gray 1953), here with its ends joined.
test.each(frameTimes)('from frame to frame of %d ms one bit turns, over the mark too', (time) => {
  const frames = cycleFrames(time);
  const codes = Array.from({ length: frames }, (_, k) => frameBits(k, frames));
  codes.forEach((code, k) => {
    const next = codes[(k + 1) % frames]!;
    expect(code.filter((bit, i) => bit !== next[i])).toHaveLength(1);
  });
  expect(new Set(codes.map((code) => code.join(''))).size).toBe(frames);
  expect(Math.abs(frames * time - timingPage.cycleMilliseconds)).toBeLessThanOrEqual(time);
});

describe('the screen’s frame time is coded with a checksum', () => {
  test.each(frameTimes)('%d ms comes back', (time) => {
    expect(readScreenBits(screenBits(time))).toBeCloseTo(time, 6);
  });
  // A CRC-8 with a polynomial of three and more terms finds every single and double error in so short a word.
  test('one or two wrong discs are found', () => {
    const bits = screenBits(16.67);
    for (let i = 0; i < bits.length; i++)
      for (let k = i; k < bits.length; k++) {
        const wrong = bits.map((bit, at) => (at === i || at === k ? 1 - bit : bit));
        expect(readScreenBits(wrong)).toBeNull();
      }
  });
  test('an empty page is none', () => {
    expect(readScreenBits(new Array(20).fill(0))).toBeNull();
    expect(readScreenBits(new Array(20).fill(1))).toBeNull();
  });
});

// Source: WCAG 2.3.1, general flash threshold: under 25 % of any 341 × 256 px (10° of view), where more than three flashes a second.
test.each([50, 60, 75, 90, 120, 144, 165, 240])(
  'at %d Hz the discs that flash more than three times a second are together below the threshold',
  (hertz) => {
    const widestPage = 1100;
    const radius = (timingPage.frameBits.disc * widestPage) / timingPage.side;
    // A flash is a pair of opposing changes; bit b of a Gray code goes through one in 4 · 2^b frames.
    const flashing = Array.from(
      { length: timingPage.frameBits.count },
      (_, bit) => hertz / (4 * 2 ** bit),
    ).filter((rate) => rate > 3);
    // The two discs of a bit change together.
    expect(2 * flashing.length * Math.PI * radius ** 2).toBeLessThan(0.25 * 341 * 256);
  },
);

describe('the browser’s intervals tell the screen', () => {
  test('frames left out by a busy browser don’t count', () => {
    const intervals = Array.from({ length: 120 }, (_, i) => (i % 9 === 0 ? 33.34 : 16.67));
    expect(measureScreen(intervals)).toEqual({
      refresh: expect.closeTo(16.67, 6),
      every: 1,
      frameTime: 16.67,
    });
  });
  test('a screen faster than the code shows each frame twice', () => {
    const screen = measureScreen(new Array(120).fill(1000 / 360));
    expect(screen?.every).toBe(2);
    expect(screen?.frameTime).toBeCloseTo(5.56, 2);
    expect(screen?.frameTime).toBeGreaterThan(frameTimeRange.shortest);
  });
  test('a screen too slow for the code is refused', () => {
    expect(measureScreen(new Array(120).fill(50))).toBeNull();
    expect(measureScreen([])).toBeNull();
  });
});
