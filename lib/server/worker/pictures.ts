import sharp, { type Sharp } from 'sharp';
import type { Plots } from '@/analysis/result';

/** Runs in a worker thread. */
export interface Picture {
  name: string;
  mediaType: 'image/webp' | 'image/jpeg';
  bytes: Uint8Array<ArrayBuffer>;
  width: number;
  height: number;
  station?: string;
}

const widths = { thumb: 480, view: 1600 };
// A crop shows the station's square and its pad, but never so much that a page of thirteen grows heavy.
const cropSide = { least: 96, most: 400 };

/** The pictures that pages show: upright, sRGB, re-encoded, so that nothing of the file's metadata is left. */
export async function derivePictures(bytes: Uint8Array, plots: Plots): Promise<Picture[]> {
  const { data, info } = await sharp(bytes, { failOn: 'none' })
    .autoOrient()
    .toColourspace('srgb')
    .removeAlpha()
    .raw()
    .toBuffer({ resolveWithObject: true });
  const channels = info.channels;
  const whole = () =>
    sharp(data, { raw: { width: info.width, height: info.height, channels } }).toColourspace(
      'srgb',
    );
  const pictures: Picture[] = [];
  for (const [name, width] of Object.entries(widths)) {
    const scaled = whole().resize({
      width,
      height: width,
      fit: 'inside',
      withoutEnlargement: true,
    });
    pictures.push(await encode(name, scaled.webp({ quality: 82, effort: 3 }), 'image/webp'));
  }
  for (const station of plots.stations ?? []) {
    const side = Math.round(Math.min(cropSide.most, Math.max(cropSide.least, station.radius * 2)));
    const left = clamp(Math.round(station.x - side / 2), info.width - side);
    const top = clamp(Math.round(station.y - side / 2), info.height - side);
    const crop = whole().extract({
      left,
      top,
      width: Math.min(side, info.width),
      height: Math.min(side, info.height),
    });
    // Full chroma: lossy WebP halves it, and that would add fringes that the camera did not make.
    const jpeg = crop.jpeg({ quality: 95, chromaSubsampling: '4:4:4' });
    pictures.push({
      ...(await encode(`crop-${station.id}`, jpeg, 'image/jpeg')),
      station: station.id,
    });
  }
  return pictures;
}

async function encode(
  name: string,
  picture: Sharp,
  mediaType: Picture['mediaType'],
): Promise<Picture> {
  const { data, info } = await picture.toBuffer({ resolveWithObject: true });
  return {
    name,
    mediaType,
    bytes: new Uint8Array(data),
    width: info.width,
    height: info.height,
  };
}

function clamp(value: number, most: number): number {
  return Math.max(0, Math.min(most, value));
}
