import type { Frame } from '../image.ts';
import type { Metric, Warning } from '../result.ts';
import type { Registration } from '../target/registration.ts';
import { type Doubt, noDoubt } from './doubt.ts';
import { readSpotPattern, type SpotPattern } from './spot-pattern.ts';

/** How far a frequency's power must stand out: rendered photographs without a pattern reach 13, JPEG 40 to 98 included. */
const standsOut = 25;
/** Smallest amplitude that counts as a pattern, share of the light. Our choice. */
const leastAmplitude = 0.005;
/** Red and blue this far out of step make stripes of colour, degrees. Our choice. */
const outOfStep = 60;
/** A monitor's lines run along the target's; the screens of print stand at angles. Degrees. Our choice. */
const alongTarget = 8;
/** Correlation of neighbours from which noise counts as smoothed; a sensor's own has none, demosaicing gives some 0.3. Our choice. */
const smoothed = 0.5;
/** Deviation in codes of 255 below which rounding has swallowed the noise: half a code's uniform rounding gives 0.29. */
const swallowed = 0.25;
/** mtf50 below which an enlarged picture can't be told from a soft one, cy/px. Our choice. */
const soft = 0.2;

/** A target shown on a monitor, other regular patterns, and noise that isn't the sensor's own any more. */
export function doubtSpots(
  frame: Frame,
  registration: Registration,
  metrics: readonly Metric[],
): Doubt {
  const pattern = readSpotPattern(frame, registration);
  if (!pattern) return noDoubt;
  const found = doubtPattern(pattern, registration);
  return found ?? doubtNoise(frame, pattern, metrics);
}

/** A monitor has a tone response, colours, pixels and stripes of its own. */
const onScreen = [
  'exposure.bias',
  'exposure.meterBias',
  'tone.',
  'colour.',
  'white.',
  'sharpness.',
  'fringe.',
  'noise.',
  'shading.',
];

function doubtPattern({ peak }: SpotPattern, registration: Registration): Doubt | null {
  if (peak.prominence < standsOut || peak.amplitude < leastAmplitude) return null;
  const screen = peak.colourPhase > outOfStep || runsAlong(peak.direction, registration);
  const percent = (100 * peak.amplitude).toFixed(1);
  if (!screen) {
    return {
      withdrawn: ['noise.snr'],
      // What lies over an edge bends its profile; seen on rendered stripes, where edges came out up to 29 % wrong.
      widened: [{ name: 'sharpness.', relative: 0.15 }],
      warnings: [
        {
          code: 'regular-pattern',
          message: `A regular pattern of ${percent} % lies over the plain ground (a coarse print, or moiré), so noise was not measured. Print the target finer, or go a little nearer or further away.`,
        },
      ],
    };
  }
  return {
    withdrawn: onScreen,
    warnings: [
      {
        code: 'target-on-screen',
        message: `A fine grid of ${percent} % lies over the plain ground, as of a monitor: its light and its edges aren’t those of a print, so only geometry and clipping were measured. Photograph the printed target.`,
      },
    ],
  };
}

/** Whether a direction in the image lies along the target's own x or y. */
function runsAlong(degrees: number, { jacobian }: Registration): boolean {
  const [a, , c] = jacobian(0, 0);
  const turn = degrees - (Math.atan2(c, a) * 180) / Math.PI;
  const off = ((turn % 90) + 90) % 90;
  return Math.min(off, 90 - off) < alongTarget;
}

function doubtNoise(frame: Frame, pattern: SpotPattern, metrics: readonly Metric[]): Doubt {
  const sigma = (255 * pattern.sigma) / frame.maxCode;
  if (frame.maxCode === 255 && sigma < swallowed) {
    return { warnings: [rounded], withdrawn: ['noise.snr'] };
  }
  if (pattern.neighbours < smoothed) return noDoubt;
  const sharpest = Math.max(
    0,
    ...metrics.filter((m) => m.name === 'sharpness.mtf50' && m.edge).map((m) => m.value),
  );
  return {
    warnings: [sharpest > 0 && sharpest < soft ? smoothedAndSoft : smoothedNoise],
    withdrawn: [],
  };
}

const rounded: Warning = {
  code: 'noise-rounded',
  message:
    'Compression or noise reduction has left no noise to measure. Set the camera to its finest JPEG quality and noise reduction to off or low.',
};
const smoothedNoise: Warning = {
  code: 'noise-smoothed',
  message:
    'Neighbouring pixels are alike in their noise: noise reduction or compression has smoothed it, so the signal-to-noise ratio is the file’s, not the sensor’s. Set noise reduction to off or low and JPEG to its finest quality.',
};
const smoothedAndSoft: Warning = {
  code: 'noise-smoothed',
  message:
    'The noise is smoothed and nothing is sharp: the picture may have been enlarged, or noise reduction is strong. Use the file as the camera wrote it, at its own size, with noise reduction off or low.',
};
