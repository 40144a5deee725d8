import type { Disc } from '../target/target.ts';

/** What one printed disc came out as: means over the inner 60 % of its radius. */
export interface DiscSample {
  readonly disc: Disc;
  readonly pixels: number;
  /** Centre and radius in image pixels. */
  readonly x: number;
  readonly y: number;
  readonly radius: number;
  /** Light at the disc against the frame's centre, 1 when the light is even. */
  readonly light: number;
  /** Trimmed mean of each channel in the file's linear light. */
  readonly linear: readonly [number, number, number];
  /** Standard uncertainty of `linear`: pixel noise over the number of pixels, and the rounding to codes. */
  readonly uncertainty: readonly [number, number, number];
  /** Luminance in linear light, and its standard uncertainty. */
  readonly luminance: number;
  readonly luminanceUncertainty: number;
  /** Some channel lies at or near an end of its range, so the mean is not the light's. */
  readonly clipped: boolean;
}
