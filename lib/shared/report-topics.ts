/**
 * The words of a report as data. A topic gathers the rules that tell of one thing; `good` is said when the result lies
 * clearly within A's limits, `low` or `high` when it is worth knowing that it lies to that side of ideal.
 * Places in braces are filled from the rule: {value}, {size} (without sign), {stops}, {compensation}, {percent} away from
 * 100, {corner} (the weakest), {cornerShare} (its share of the middle), {seen} (how visible a fringe is), {noticed} (how
 * visible a difference in colour is), {peers}.
 */
export interface Line {
  title: string;
  text: string;
}
export interface TopicWords {
  /** Names quantities whose rules belong here. */
  quantities: readonly string[];
  good: Line;
  low?: Line;
  high?: Line;
}

export const topics = {
  exposure: {
    quantities: ['exposure.bias'],
    good: {
      title: 'Exposure is right.',
      text: 'Automatic exposure lies {size} EV from mid grey: no compensation is needed.',
    },
    low: { title: 'Dark exposures.', text: '{stops} under. Set compensation to {compensation}.' },
    high: {
      title: 'Light exposures.',
      text: '{stops} over. Set compensation to {compensation}, or bright parts wash out.',
    },
  },
  highlights: {
    quantities: ['clip.highlights'],
    good: {
      title: 'Bright parts keep their detail.',
      text: 'Of the test picture {value} % came out pure white.',
    },
    high: {
      title: 'Bright parts wash out.',
      text: '{value} % of the test picture came out pure white. Expose a little less in strong light.',
    },
  },
  colour: {
    quantities: ['colour.error'],
    good: {
      title: 'Colours are true.',
      text: '{value} ΔE from the printed colours on average: {noticed}.',
    },
    high: {
      title: 'Colours are off.',
      text: '{value} ΔE from the printed colours on average: plan to correct them afterwards.',
    },
  },
  saturation: {
    quantities: ['colour.saturation'],
    good: {
      title: 'Colours have the right strength.',
      text: '{value} % of the printed colours’ strength: skin and skies look natural.',
    },
    low: {
      title: 'Pale colours.',
      text: '{percent} % weaker than printed. Raise saturation in the menu or afterwards.',
    },
    high: {
      title: 'Strong colours.',
      text: '{percent} % stronger than printed. Lower saturation if skin looks painted.',
    },
  },
  white: {
    quantities: ['white.error'],
    good: {
      title: 'Whites are white.',
      text: 'Greys lie {value} ΔC from neutral: there is no cast to correct.',
    },
    high: {
      title: 'Colour cast.',
      text: 'Greys lie {value} ΔC from neutral. Set white balance by hand on something white.',
    },
  },
  sharpness: {
    quantities: ['sharpness.mtf50'],
    good: {
      title: 'Sharp in the middle.',
      text: 'Fine detail holds: half the contrast is left at {value} cycles per pixel{peers}.',
    },
    low: {
      title: 'Soft in the middle.',
      text: 'Half the contrast is left at only {value} cycles per pixel: fine for small prints and screens.',
    },
  },
  corners: {
    quantities: ['sharpness.cornerRatio'],
    good: {
      title: 'Sharp into the corners.',
      text: 'They keep {value} % of the middle{peers}: place the subject where you like.',
    },
    low: {
      title: 'Soft corners.',
      text: 'They keep {value} % of the middle. Close the aperture, or keep the subject away from them.',
    },
  },
  evenness: {
    quantities: ['sharpness.asymmetry'],
    good: {
      title: 'The lens sits true.',
      text: 'Its four corners differ by {value} %: no side is blurred.',
    },
    high: {
      title: '{corner} corner soft.',
      text: '{cornerShare} % of the middle. Compose with the subject away from it, or close the aperture.',
    },
  },
  fringes: {
    quantities: ['fringe.red', 'fringe.blue'],
    good: {
      title: 'Hardly any colour fringes.',
      text: 'At most {size} pixels in the corners{peers}: {seen}.',
    },
    low: {
      title: 'Colour fringes towards the edges.',
      text: '{size} pixels in the corners: {seen}.',
    },
    high: {
      title: 'Colour fringes towards the edges.',
      text: '{size} pixels in the corners: {seen}.',
    },
  },
  shift: {
    quantities: ['fringe.shift'],
    good: {
      title: 'The colours meet.',
      text: 'Red and blue lie {value} pixels from green: edges stay clean.',
    },
    high: {
      title: 'The colours don’t quite meet.',
      text: 'Red or blue lies {value} pixels aside over the whole frame, as after a knock to the lens.',
    },
  },
  noise: {
    quantities: ['noise.snr'],
    good: {
      title: 'Clean pictures.',
      text: 'Skies and skin stay smooth: {value} dB in mid grey{peers}.',
    },
    low: {
      title: 'Grainy pictures.',
      text: '{value} dB in mid grey. Use the lowest sensitivity and plenty of light.',
    },
  },
  light: {
    quantities: ['shading.corner'],
    good: {
      title: 'Light reaches the corners.',
      text: 'They differ from the middle by {size} EV: plain skies look even.',
    },
    low: {
      title: 'Dark corners.',
      text: '{size} EV darker than the middle, as plain skies show. Close the aperture, or correct it afterwards.',
    },
    high: { title: 'Light corners.', text: '{size} EV lighter than the middle.' },
  },
  lightEvenness: {
    quantities: ['shading.asymmetry'],
    good: {
      title: 'Evenly lit.',
      text: 'The four corners differ by {value} EV: no side comes out darker.',
    },
    high: {
      title: 'Unevenly lit.',
      text: 'The four corners differ by {value} EV: one side comes out darker.',
    },
  },
  geometry: {
    quantities: ['distortion.corner'],
    good: {
      title: 'Straight lines stay straight.',
      text: 'The corners are {size} % out of place: walls and horizons look straight.',
    },
    low: {
      title: 'Lines bow outward.',
      text: '{size} % at the corners: correct it afterwards when buildings matter.',
    },
    high: {
      title: 'Lines bow inward.',
      text: '{size} % at the corners: correct it afterwards when buildings matter.',
    },
  },
} as const satisfies Record<string, TopicWords>;

export type TopicId = keyof typeof topics;

/** What a buyer asks first stands first among the good things. */
export const goodFirst: readonly TopicId[] = [
  'sharpness',
  'corners',
  'exposure',
  'colour',
  'noise',
  'fringes',
  'evenness',
  'white',
  'saturation',
  'highlights',
  'light',
  'geometry',
  'lightEvenness',
  'shift',
];

/** Worth knowing of a good camera too: said as weak with less room inside A's limits than this; all others with `near`. */
export const worthKnowing: Partial<Record<TopicId, number>> = {
  light: 0.6,
  geometry: 0.6,
  fringes: 0.6,
};
export const near = 0.35;

/** A good thing isn't said beside a weakness that a reader would take for its opposite. */
export const unsaidBeside: Partial<Record<TopicId, readonly TopicId[]>> = {
  corners: ['evenness', 'sharpness'],
  saturation: ['colour'],
  colour: ['saturation', 'white'],
  white: ['colour'],
  light: ['lightEvenness'],
  lightEvenness: ['light'],
};

/** The first whose conditions hold is the report's headline. */
export const headlines: readonly { letter?: 'Parts'; weak?: readonly TopicId[]; text: string }[] = [
  { letter: 'Parts', text: 'For parts or repair, not sold as a working camera' },
  { weak: ['sharpness'], text: 'It works, but its pictures are soft' },
  {
    weak: ['corners', 'fringes'],
    text: 'Takes good pictures in the middle; softer and colour-fringed at the edges',
  },
  { weak: ['evenness'], text: 'Sharp in the middle; one corner is softer than the others' },
  { weak: ['corners'], text: 'Takes good pictures in the middle; softer towards the edges' },
  { weak: ['fringes'], text: 'Takes sharp pictures, with colour fringes towards the edges' },
  { weak: ['shift'], text: 'Takes sharp pictures, with colours slightly out of register' },
  { weak: ['exposure'], text: 'Takes good pictures once its exposure is set right' },
  { weak: ['highlights'], text: 'Takes good pictures; mind the bright parts' },
  { weak: ['white'], text: 'Takes sharp pictures; set the white balance by hand' },
  { weak: ['colour'], text: 'Takes sharp pictures; the colours want correcting' },
  { weak: ['saturation'], text: 'Takes sharp pictures; mind the strength of the colours' },
  { weak: ['noise'], text: 'Takes sharp pictures in good light; grainy in poor light' },
  { weak: ['light'], text: 'Takes sharp pictures that darken towards the corners' },
  { weak: ['lightEvenness'], text: 'Takes sharp pictures, not quite evenly lit' },
  { weak: ['geometry'], text: 'Takes sharp pictures; straight lines bow a little' },
  { text: 'Takes good pictures, sharp into the corners' },
];

export const openings = {
  A: 'In very good order for its class.',
  B: 'A sound camera for its class.',
  C: 'A working camera with weaknesses to know about.',
  Parts: 'Not to be relied on for pictures.',
} as const;

/** Said of every camera that leaves a bench. */
export const cautions: readonly string[] = [
  'Measured with one lens setting and light, as stated; other settings can differ.',
  'Old lithium cells lose capacity and can swell: charge them attended, and stop using one that bulges.',
  'Don’t open the camera: a flash capacitor can hold some 300 V long after the batteries are out.',
];
