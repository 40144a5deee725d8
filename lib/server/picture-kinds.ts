import 'server-only';
import { UserError } from '@/lib/shared/errors';

const ascii = (bytes: Uint8Array, from: number, to: number) =>
  String.fromCharCode(...bytes.subarray(from, to));
const starts = (bytes: Uint8Array, ...magic: number[]) => magic.every((b, i) => bytes[i] === b);

/** Bytes that `mediaTypeOf` looks at. */
export const magicLength = 32;

/** What a file is by its first bytes, whatever its name says; a kind that isn't read is refused in a sentence. */
export function mediaTypeOf(bytes: Uint8Array): string {
  if (starts(bytes, 0xff, 0xd8, 0xff)) return 'image/jpeg';
  if (starts(bytes, 0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a)) return 'image/png';
  if (ascii(bytes, 0, 4) === 'RIFF' && ascii(bytes, 8, 12) === 'WEBP') return 'image/webp';
  if (starts(bytes, 0x49, 0x49, 0x2a, 0) || starts(bytes, 0x4d, 0x4d, 0, 0x2a)) return 'image/tiff';
  if (ascii(bytes, 4, 8) === 'ftyp') return isoMedia(ascii(bytes, 8, magicLength));
  if (bytes.length === 0) {
    throw new UserError('invalid', 'The file is empty: copy it from the card again.');
  }
  throw new UserError(
    'unsupported',
    'This is not a picture that can be read: send JPEG, PNG, TIFF, WebP or AVIF.',
  );
}

/** AVIF, HEIC and films share a container; the brands after `ftyp` tell them apart. */
function isoMedia(brands: string): string {
  if (/avif|avis/.test(brands)) return 'image/avif';
  const heic = /hei[cfxms]|hev[cx]|mif1/.test(brands);
  throw new UserError(
    'unsupported',
    heic
      ? 'HEIC is not read: set the camera to JPEG, or export the picture as JPEG.'
      : 'This is a film, not a photograph: send JPEG, PNG, TIFF, WebP or AVIF.',
  );
}
