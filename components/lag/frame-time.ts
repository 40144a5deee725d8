import { frameTimeRange } from '@/analysis/time/timing-page';

/** What the browser's own frames say of the screen. */
export interface ScreenTime {
  /** From one frame of the screen to the next, ms. */
  readonly refresh: number;
  /** Frames of the screen that each frame of the page lasts: more than 1 only on screens over 250 Hz. */
  readonly every: number;
  /** refresh · every, rounded as the page can say it: multiples of 0.01 ms. */
  readonly frameTime: number;
}

/** Intervals that are looked at before the page runs: two seconds at 60 Hz. */
export const intervalsWanted = 120;

/**
 * The screen's frame time from intervals between animation frames, ms: the mean of those within a fifth of the median, since a busy
 * browser leaves frames out. Null for a screen too slow for the page's code.
 */
export function measureScreen(intervals: readonly number[]): ScreenTime | null {
  const sorted = intervals.filter((ms) => ms > 1).sort((a, b) => a - b);
  const middle = sorted[sorted.length >> 1];
  if (middle === undefined) return null;
  const whole = sorted.filter((ms) => Math.abs(ms / middle - 1) < 0.2);
  const refresh = whole.reduce((sum, ms) => sum + ms, 0) / whole.length;
  const every = Math.ceil(frameTimeRange.shortest / refresh);
  const frameTime = Math.round(refresh * every * 100) / 100;
  return frameTime > frameTimeRange.longest ? null : { refresh, every, frameTime };
}

/** Frames of the screen since the last one drawn: more than 1 where the browser left some out. */
export function framesPassed(intervalMs: number, refresh: number): number {
  return Math.max(1, Math.round(intervalMs / refresh));
}
