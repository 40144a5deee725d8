/** Endings that the server decodes; what a file really is, it finds out itself. */
export const pictureEndings = ['jpg', 'jpeg', 'png', 'tif', 'tiff', 'webp', 'avif'] as const;

/** For the file picker and the drop zone. */
export const acceptedPictures = {
  'image/jpeg': ['.jpg', '.jpeg'],
  'image/png': ['.png'],
  'image/tiff': ['.tif', '.tiff'],
  'image/webp': ['.webp'],
  'image/avif': ['.avif'],
};

const raw = new Set(['dng', 'raw', 'cr2', 'cr3', 'nef', 'arw', 'orf', 'rw2', 'raf', 'pef', 'srw']);
const video = new Set(['mov', 'mp4', 'avi', 'mts', 'mpg']);

/** Why a file need not even be sent, or null. */
export function refusalOf(name: string, bytes: number): string | null {
  const ending = name.toLowerCase().split('.').pop() ?? '';
  if (bytes === 0) return 'The file is empty: copy it from the card again.';
  if ((pictureEndings as readonly string[]).includes(ending)) return null;
  if (raw.has(ending)) return 'Raw files are not read: set the camera to JPEG, or RAW + JPEG.';
  if (video.has(ending)) return 'A video, not a photograph: left out.';
  if (ending === 'heic' || ending === 'heif')
    return 'HEIC is not read: export the picture as JPEG, or set the camera to JPEG.';
  return 'Not a picture this bench reads: send JPEG, PNG, TIFF, WebP or AVIF.';
}

/** Seconds left at the pace so far; null until there is a pace. */
export function secondsLeft(sent: number, total: number, milliseconds: number): number | null {
  if (sent <= 0 || milliseconds < 400) return null;
  return Math.max(0, Math.ceil(((total - sent) / sent) * (milliseconds / 1000)));
}
