import * as iq from 'image-q';

export interface PaletteColour {
  /** #rrggbb in sRGB. */
  readonly colour: string;
  /** Part of the picture that lies nearest to it, 0…1. */
  readonly share: number;
}

export interface Palette {
  readonly colours: PaletteColour[];
  /** Root mean square distance of the pixels from their colour, codes of 255 a channel. */
  readonly scatter: number;
}

/**
 * Dominant colours of a small picture, most frequent first, by Xiaolin Wu's quantisation (image-q) with Euclidean distance in sRGB:
 * its CIEDE2000 takes seconds on pictures of this size.
 * @param rgb   interleaved sRGB codes 0…255, at most some 64 pixels a side
 * @param count colours asked for
 */
export function findPalette(
  rgb: Uint8Array,
  width: number,
  height: number,
  count: number,
): Palette {
  const rgba = new Uint8Array(width * height * 4).fill(255);
  for (let i = 0; i < width * height; i++)
    for (let c = 0; c < 3; c++) rgba[i * 4 + c] = rgb[i * 3 + c]!;
  const points = iq.utils.PointContainer.fromUint8Array(rgba, width, height);
  const found = iq
    .buildPaletteSync([points], {
      colors: count,
      colorDistanceFormula: 'euclidean',
      paletteQuantization: 'wuquant',
    })
    .getPointContainer()
    .getPointArray()
    .map(({ r, g, b }) => [r, g, b] as const);
  const hits = new Float64Array(found.length);
  let squares = 0;
  for (let i = 0; i < width * height; i++) {
    let nearest = 0;
    let least = Number.POSITIVE_INFINITY;
    found.forEach((colour, k) => {
      const distance = colour.reduce((sum, v, c) => sum + (v - rgb[i * 3 + c]!) ** 2, 0);
      if (distance < least) [nearest, least] = [k, distance];
    });
    hits[nearest]!++;
    squares += least;
  }
  const colours = found
    .map((colour, k) => ({ colour: toHex(colour), share: hits[k]! / (width * height) }))
    .filter(({ share }) => share > 0)
    .sort((a, b) => b.share - a.share || a.colour.localeCompare(b.colour));
  return { colours, scatter: Math.sqrt(squares / (3 * width * height)) };
}

function toHex(colour: readonly number[]): string {
  return `#${colour.map((v) => Math.round(v).toString(16).padStart(2, '0')).join('')}`;
}
