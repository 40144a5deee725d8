import sharp from 'sharp';
import { skiff12 } from '@/fixtures/demo/models';
import { renderScene } from '@/fixtures/scene/render';

/** Where no buyer may learn that the bench stands; invented, in the open sea. */
export const position = { latitude: '47/1 13/1 4127/100', longitude: '17/1 52/1 1893/100' };

/** A photograph of the target as a sound camera takes it: its pixels, to be written as often as files are wanted. */
export async function renderTarget(seed: number): Promise<Buffer> {
  const { bytes } = await renderScene({
    ...skiff12.sound,
    fill: 0.95 + (seed % 3) * 0.008,
    rotationDegrees: ((seed % 5) - 2) * 0.4,
    format: { type: 'png' },
    seed,
  });
  return bytes;
}

/** The JPEG that the camera would write of it, its position and serial in the Exif. */
export function asPhotograph(pixels: Buffer, serial: string, second: number): Promise<Buffer> {
  const time = `2026:11:20 10:15:${String(second).padStart(2, '0')}`;
  return sharp(pixels)
    .withExif({
      IFD0: { Make: skiff12.maker, Model: skiff12.model },
      IFD2: {
        BodySerialNumber: serial,
        ExposureTime: '1/60',
        FNumber: '35/10',
        ISOSpeedRatings: '100',
        FocalLength: '62/10',
        DateTimeOriginal: time,
        ColorSpace: '1',
      },
      IFD3: {
        GPSLatitudeRef: 'S',
        GPSLatitude: position.latitude,
        GPSLongitudeRef: 'W',
        GPSLongitude: position.longitude,
      },
    })
    .jpeg({ quality: 92, chromaSubsampling: '4:2:0' })
    .toBuffer();
}
