import type { DiscSample } from '../colour/disc-sample.ts';
import type { Frame } from '../image.ts';
import type { Warning } from '../result.ts';
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
  const spoiled = raw.length - greys.samples.length;
  const broad = spoiled >= mostSpoiled && !greys.hopeless ? [broadGlare] : [];
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
export const doubtTone: Doubt = {
  warnings: [],
  withdrawn: [],
  widened: [{ name: 'sharpness.', relative: 0.05 }],
};
