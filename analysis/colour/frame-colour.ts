import type { Frame } from '../image.ts';
import { apply, type Triple } from './matrix.ts';

/** Weights of the file's own linear channels in luminance Y. */
export function luminanceWeights({ toSrgb }: Frame): [number, number, number] {
  const y: Triple = [0.2126, 0.7152, 0.0722];
  if (!toSrgb) return [...y];
  const weight = (i: number) => y[0] * toSrgb[i]! + y[1] * toSrgb[3 + i]! + y[2] * toSrgb[6 + i]!;
  return [weight(0), weight(1), weight(2)];
}

/** The file's linear channels as linear sRGB. */
export function toLinearSrgb({ toSrgb }: Frame, linear: Triple): [number, number, number] {
  return toSrgb ? apply(toSrgb, linear) : [...linear];
}
