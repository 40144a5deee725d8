import type { Capture } from '../image.ts';
import type { Metric, Warning } from '../result.ts';
import type { GreyPoint } from './fit-exposures.ts';
import { divisionOf, exactFNumber, exactSpeed, exactTime, timeLabel } from './series.ts';

/** One photograph of a ladder. */
export interface LadderShot {
  /** What the warnings call it: the file's name. */
  readonly name: string;
  readonly capture: Capture;
  /** The target's greys, clipped ones left out; null where no target was found. */
  readonly greys: readonly GreyPoint[] | null;
  /** exposure.median and clip.highlights of the frame: for what a null method can tell without greys. */
  readonly median: Metric | null;
  readonly clippedHighlights: number;
}

/** A photograph whose settings are known. */
export interface PlacedShot extends LadderShot {
  /** The rung's name: what varies of time and aperture, with repeats alike. */
  readonly zone: string;
  /** log2 of exposure time over the squared f-number times sensitivity, exact series values, from any zero. */
  readonly nominal: number;
}

/** Names each rung and its nominal exposure; shots without an exposure time are left out and named. */
export function placeShots(shots: readonly LadderShot[]): {
  placed: PlacedShot[];
  warnings: Warning[];
} {
  const warnings: Warning[] = [];
  const timed = shots.filter((shot) => {
    const { exposureTime } = shot.capture;
    if (exposureTime === null) {
      const reason = 'its Exif tells no exposure time';
      warnings.push(leftOut(shot.name, undefined, reason));
    }
    return exposureTime !== null;
  });
  const times = timed.map(({ capture }) => capture.exposureTime ?? 1);
  const fNumbers = timed.flatMap(({ capture }) => capture.fNumber ?? []);
  const speeds = timed.flatMap(({ capture }) => capture.iso ?? []);
  const division = divisionOf(times, fNumbers);
  const varies = (values: readonly number[]) => new Set(values).size > 1;
  if (varies(speeds)) warnings.push(speedVaries);
  if (fNumbers.length > 0 && fNumbers.length < timed.length) warnings.push(apertureUntold);
  const placed = timed.map((shot, i) => {
    const { fNumber, iso } = shot.capture;
    const aperture = varies(fNumbers) && fNumber !== null ? `f/${fNumber}` : '';
    const time = varies(times) || aperture === '' ? timeLabel(times[i]!) : '';
    const speed = varies(speeds) && iso !== null ? `ISO ${iso}` : '';
    return {
      ...shot,
      zone: [time, aperture, speed].filter((part) => part !== '').join(' '),
      nominal:
        Math.log2(exactTime(times[i]!, division)) -
        2 * Math.log2(fNumber === null ? 1 : exactFNumber(fNumber, division)) +
        Math.log2(iso === null ? 1 : exactSpeed(iso)),
    };
  });
  return { placed, warnings };
}

export function leftOut(name: string, zone: string | undefined, reason: string): Warning {
  return {
    code: 'ladder-rung-left-out',
    message: `${zone ? `${zone} (${name})` : name} was left out of the ladder: ${reason}. Photograph this rung again.`,
    ...(zone ? { zone } : {}),
  };
}

/** % of the frame at the top of the scale beyond which a frame without a readable target counts as clipped. Our choice. */
export const muchClipping = 20;
export const overExposed = 'it is over-exposed up to clipping';

export function clippedRung(name: string, zone: string, reason: string): Warning {
  return { ...leftOut(name, zone, reason), code: 'ladder-rung-clipped' };
}

const speedVaries: Warning = {
  code: 'ladder-iso-varies',
  message:
    'The rungs differ in ISO, so errors of its steps count as errors of the shutter. Keep the ISO the same.',
};
const apertureUntold: Warning = {
  code: 'ladder-aperture-untold',
  message:
    'Some files tell no aperture; it was taken to be unchanged there. Use the files as the camera wrote them.',
};
