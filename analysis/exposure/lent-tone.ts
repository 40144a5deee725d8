import { midGrey, toLinear } from '../colour/srgb.ts';
import type { Frame } from '../image.ts';
import type { LocalFit } from './local-fit.ts';
import { midToneLuminance, responseCurve, stopsAt } from './tone.ts';

/** A grey of the run's target shot: its reflectance and the code it came out at, 0…1 of full scale. */
export interface TonePoint {
  readonly reflectance: number;
  readonly code: number;
}

/** The way from codes to light for kinds of photograph that hold no greys. */
export interface LightScale {
  /** The run's target shot lent its tone response, or else the sRGB curve is assumed. */
  readonly lent: boolean;
  /** Code 0…1 of full scale → relative light. */
  codeToLight(code: number): number;
  /** Luminance in the file's linear light → stops against the light that gives code 118, with its standard uncertainty. */
  stopsOverMidTone(luminance: number): { value: number; uncertainty: number } | null;
}

/** Standard deviation of the mid-tone contrast of ordinary renderings about 1. Common practice, no source: 0.8–1.4 are met. */
export const contrastSpread = 0.18;
/** Doubt of one lent point, stops; the greys of a target shot give some hundredths. Found by rendering. */
const pointDoubt = 0.006;
const fewestPoints = 4;

/** @param points the greys of the target shot that are unclipped; with fewer than four the sRGB curve is assumed */
export function lightScale(frame: Frame, points: readonly TonePoint[] = []): LightScale {
  const usable = points
    .filter(({ reflectance, code }) => reflectance > 0 && code > 0 && code < 1)
    .map(({ reflectance, code }) => ({
      x: Math.log2(toLinear(code)),
      y: Math.log2(reflectance),
      sigma: pointDoubt,
    }));
  const curve = usable.length < fewestPoints ? null : responseCurve(usable);
  const sorted = usable.map(({ x }) => 2 ** x).sort((a, b) => a - b);
  const range = [sorted[0] ?? 0, sorted.at(-1) ?? 1] as const;
  const middle = curve && stopsAt(usable, range, midToneLuminance);
  if (!curve || !middle) return assumed(frame);
  return {
    lent: true,
    codeToLight: (code) => curve(fileLinear(frame, code)),
    stopsOverMidTone: (luminance) => {
      const fit: LocalFit | null = stopsAt(usable, range, luminance);
      return (
        fit && {
          value: fit.value - middle.value,
          uncertainty: Math.hypot(fit.uncertainty, middle.uncertainty),
        }
      );
    },
  };
}

function assumed(frame: Frame): LightScale {
  return {
    lent: false,
    codeToLight: (code) => fileLinear(frame, code),
    stopsOverMidTone: (luminance) => {
      if (!(luminance > 0)) return null;
      const value = Math.log2(luminance / midToneLuminance);
      // A curve steeper or flatter than sRGB's about mid grey tells the wrong number of stops in proportion.
      const fromMid = Math.log2(luminance / midGrey);
      return { value, uncertainty: Math.abs(fromMid) * contrastSpread };
    },
  };
}

/** Green stands for all: flat frames and grey cards have no colour of their own. */
function fileLinear(frame: Frame, code: number): number {
  const at = Math.min(frame.maxCode, Math.max(0, code * frame.maxCode));
  const low = Math.floor(at);
  const table = frame.toLinear[1];
  const below = table[low]!;
  return below + (table[Math.min(low + 1, frame.maxCode)]! - below) * (at - low);
}
