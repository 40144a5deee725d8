import type { DiscSample } from '../colour/disc-sample.ts';
import { midGrey } from '../colour/srgb.ts';
import { isGrey } from '../exposure/tone.ts';
import type { Frame } from '../image.ts';
import type { Metric, Warning } from '../result.ts';
import { leaveOutAstray } from './astray-greys.ts';
import type { Doubt } from './doubt.ts';
import { leaveOutUneven } from './uneven-discs.ts';

/** Discs left out from which the light on all the others is in doubt as well. Our choice. */
const mostSpoiled = 3;

export interface JudgedDiscs {
  /** Those that stand, with the light at each. */
  readonly samples: DiscSample[];
  readonly warnings: Warning[];
  /** So much lies in uneven light that no tone response can be trusted. */
  readonly hopeless: boolean;
}

/** Leaves out discs on which a reflection, a shadow or dirt lies. `lightAt` is the slow shading, 1 at the frame's centre. */
export function judgeDiscs(
  frame: Frame,
  raw: readonly DiscSample[],
  lightAt: (x: number, y: number) => number,
): JudgedDiscs {
  const { even, warnings } = leaveOutUneven(frame, raw, lightAt);
  const lit = even.map((s) => ({ ...s, light: lightAt(s.x, s.y) }));
  const greys = leaveOutAstray(lit);
  const uneven = raw.length - even.length;
  const astray = even.length - greys.samples.length;
  // A narrow reflection spoils what it lies on; where greys beside it are astray as well, it is broad.
  const isBroad = uneven + astray >= mostSpoiled || (uneven > 0 && astray > 0);
  const broad = isBroad && !greys.hopeless ? [broadGlare] : [];
  return {
    samples: greys.samples,
    warnings: [...warnings, ...greys.warnings, ...broad],
    hopeless: greys.hopeless || broad.length > 0,
  };
}

const broadGlare: Warning = {
  code: 'glare',
  message:
    'Light lies unevenly on so many discs that those beside them are lit from it as well; exposure, tone and colour were not measured. Move the lamps to the sides so that nothing is mirrored in the print, and photograph again.',
};

/** Without the camera's tone response an edge's light is read through the file's own curve: some per cent for a contrasty camera. */
const withoutTone = 0.05;
/** Uneven light bends the response that the greys tell; relative doubt of sharpness for each EV of it. Found on rendered scenes. */
const perUnevenEv = 0.05;
/** Asymmetry of light, EV, from which that counts; as in warnings.ts. */
const unevenLight = 0.3;
/** Stops to each side of mid grey over which tone.contrast is told. */
const contrastReach = 1.5;

/** What clipped greys, a missing tone response and uneven light leave in doubt. Their warnings are given elsewhere. */
export function doubtLight(
  samples: readonly DiscSample[],
  hasTone: boolean,
  shading: readonly Metric[],
): Doubt {
  const clipped = samples.some(
    (s) =>
      isGrey(s) && s.clipped && Math.abs(Math.log2(s.disc.reflectance! / midGrey)) < contrastReach,
  );
  const asymmetry = shading.find(({ name }) => name === 'shading.asymmetry')?.value ?? 0;
  const uneven = asymmetry > unevenLight ? perUnevenEv * asymmetry : 0;
  const relative = Math.hypot(hasTone ? 0 : withoutTone, uneven);
  return {
    warnings: [],
    withdrawn: clipped ? ['tone.contrast'] : [],
    widened: relative > 0 ? [{ name: 'sharpness.', relative }] : [],
  };
}
