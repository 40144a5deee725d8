import type { Frame } from '../image.ts';
import type { Warning } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { type Doubt, noDoubt } from './doubt.ts';

/** Degrees from the pixel grid below which an edge's phases repeat so seldom that its sharpness hangs on chance. Our choice. */
const nearGrid = 1;
/** Root mean square distance of the squares' corners from the lens's model, target units, beyond which the print isn't flat. Our choice. */
const muchBent = 0.6;

/** Target 700 px high, as in warnings.ts: below, edges are so short that what averages out elsewhere doesn't. Found on rendered scenes. */
const fewPixelsPerUnit = 0.78;
const shortEdges = 0.015;

/** Stations that could not be used, a print that isn't flat, and edges that run along the pixel grid. */
export function doubtRegistration(frame: Frame, registration: Registration): Doubt {
  const warnings = [
    ...warnOfStations(frame, registration),
    ...warnOfFlatness(registration),
    ...warnOfAngle(registration),
  ];
  const [a, b, c, d] = registration.jacobian(0, 0);
  const small = Math.sqrt(Math.abs(a * d - b * c)) < fewPixelsPerUnit;
  if (warnings.length === 0 && !small) return noDoubt;
  const widened = small ? [{ name: 'sharpness.', relative: shortEdges }] : [];
  return { warnings, withdrawn: [], widened };
}

/** Squares inside the frame whose corners were not found, or not where the others put them. */
function warnOfStations(frame: Frame, { target, corners, toImage }: Registration): Warning[] {
  const { padRadius } = target.station;
  const whole = (x: number, y: number) =>
    [-1, 1].every((sx) =>
      [-1, 1].every((sy) => {
        const p = toImage(x + sx * padRadius, y + sy * padRadius);
        return p.x > 0 && p.y > 0 && p.x < frame.width && p.y < frame.height;
      }),
    );
  const left = target.stations.filter(({ id, x, y }) => !corners.has(id) && whole(x, y));
  if (left.length === 0) return [];
  const names = left.map(({ id }) => id).join(', ');
  return [
    {
      code: 'stations-left-out',
      message: `Not measured: ${names}. There the squares’ edges are unclear or not where all the others put them: light glares, something lies on the print, or it isn’t flat. Press the print flat, move the lamps to the sides and photograph again.`,
    },
  ];
}

function warnOfFlatness({ summary, jacobian }: Registration): Warning[] {
  const [a, b, c, d] = jacobian(0, 0);
  const units = summary.residual / Math.sqrt(Math.abs(a * d - b * c));
  if (!(units > muchBent)) return [];
  return [
    {
      code: 'print-not-flat',
      message: `The squares lie ${units.toFixed(1)} units (1/900 of the target’s height) from where a flat print would have them, so distortion and focus are less certain. Press the print flat, under glass if need be, and photograph again.`,
    },
  ];
}

/** The squares are turned by 5°; the camera's roll can turn them back. */
function warnOfAngle({ target, jacobian }: Registration): Warning[] {
  const [a, b, c, d] = jacobian(0, 0);
  const turn = (target.station.rotationDegrees * Math.PI) / 180;
  const [ux, uy] = [Math.cos(turn), Math.sin(turn)];
  const offGrid = [
    [a * ux + b * uy, c * ux + d * uy],
    [b * ux - a * uy, d * ux - c * uy],
  ].map(([x, y]) => {
    const degrees = (Math.atan2(Math.abs(y!), Math.abs(x!)) * 180) / Math.PI;
    return Math.min(degrees, 90 - degrees);
  });
  if (Math.min(...offGrid) >= nearGrid) return [];
  return [
    {
      code: 'edge-angle',
      message:
        'The squares’ edges run along the rows of pixels, where sharpness can be told only roughly. Turn the camera by two or three degrees and photograph again.',
    },
  ];
}
