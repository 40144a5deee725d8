import exifr from 'exifr';
import sharp, { type Metadata, type Sharp } from 'sharp';
import { type ExifTags, readCapture, readColourSpace } from './capture.ts';
import { warnOfFile } from './doubt/doubt-file.ts';
import { MeasurementError } from './errors.ts';
import { adobeRgbSpace, type ColourSpace, readProfile, srgbSpace } from './icc.ts';
import type { Capture, Frame } from './image.ts';
import { readBlockStep } from './jpeg-tables.ts';
import type { Warning } from './result.ts';

export type Format = 'jpeg' | 'png' | 'tiff' | 'webp' | 'avif';

export interface Decoded {
  readonly frame: Frame;
  readonly capture: Capture;
  readonly format: Format;
  /** Length of the file. */
  readonly bytes: number;
  readonly warnings: readonly Warning[];
}

/** Larger pictures are refused: their pixels alone would take 360 MB and more. */
const maxPixels = 120e6;
/** Shorter sides than this hold nothing to measure. */
const minSide = 64;

// Every photograph is decoded once; a cache of operations would only hold on to its pixels.
sharp.cache(false);

/**
 * Decodes a photograph to the codes as stored, upright, with the way to linear sRGB.
 * JPEG, PNG, TIFF, WebP and AVIF, told by content; 16-bit files keep their depth.
 * Colour space: embedded ICC profile, else Exif (sRGB, or Adobe RGB by interoperability index R03), else sRGB with a warning.
 * @throws MeasurementError for everything that can't be measured: codes unsupported-format, raw-file, damaged-file, cmyk,
 * no-colour, animated, several-pages, unsupported-depth, too-large, too-small, empty-file
 */
export async function decode(bytes: Uint8Array): Promise<Decoded> {
  const format = sniffFormat(bytes);
  const metadata = await readMetadata(bytes);
  const tags = await readTags(bytes, format, metadata);
  refuseUnmeasurable(format, metadata, tags);
  const maxCode = metadata.depth === 'ushort' ? 65_535 : 255;
  const colour = chooseColourSpace(metadata, tags, maxCode);
  const warnings = [...colour.warnings];
  if (metadata.hasAlpha) {
    warnings.push({
      code: 'transparency-ignored',
      message: 'The file has a transparency channel, which was ignored. Use the camera’s own file.',
    });
  }
  const pixels = await readPixels(bytes, maxCode, colour.convert);
  const blockStep = format === 'jpeg' ? readBlockStep(bytes) : null;
  warnings.push(...warnOfFile(tags, metadata, blockStep));
  return {
    frame: {
      ...pixels,
      maxCode,
      ...colour.space,
      ...(blockStep ? { blockStep } : {}),
      chromaHalved: metadata.chromaSubsampling?.startsWith('4:2') ?? false,
    },
    capture: readCapture(tags),
    format,
    bytes: bytes.length,
    warnings,
  };
}

function sniffFormat(bytes: Uint8Array): Format {
  if (bytes.length === 0) {
    throw new MeasurementError(
      'empty-file',
      'The file is empty. Copy it from the card again and send it once more.',
    );
  }
  const head = String.fromCharCode(...bytes.subarray(0, 32));
  if (head.startsWith('\xff\xd8\xff')) return 'jpeg';
  if (head.startsWith('\x89PNG\r\n\x1a\n')) return 'png';
  if (/^(II[*+]\0|MM\0[*+])/.test(head)) return 'tiff';
  if (/^RIFF[\s\S]{4}WEBP/.test(head)) return 'webp';
  if (/^[\s\S]{4}ftyp/.test(head) && /avi[fs]/.test(head.slice(8))) return 'avif';
  throw new MeasurementError(
    'unsupported-format',
    `This is ${nameFormat(head)}. Use JPEG, PNG, TIFF, WebP or AVIF, best the JPEG as the camera wrote it.`,
  );
}

function nameFormat(head: string): string {
  if (/^[\s\S]{4}ftyp(hei|hev|mif1|msf1)/.test(head)) return 'a HEIC picture';
  if (/^[\s\S]{4}ftyp/.test(head)) return 'a film';
  if (head.startsWith('GIF8')) return 'a GIF picture';
  if (head.startsWith('%PDF')) return 'a PDF document';
  if (head.startsWith('BM')) return 'a BMP picture';
  return 'not a picture in a format that can be measured';
}

async function readMetadata(bytes: Uint8Array): Promise<Metadata> {
  try {
    return await sharp(bytes, { limitInputPixels: false }).metadata();
  } catch {
    throw damaged();
  }
}

async function readTags(bytes: Uint8Array, format: Format, metadata: Metadata): Promise<ExifTags> {
  const exif = metadata.exif;
  const block = format === 'tiff' ? bytes : exif && withoutPrefix(exif);
  if (!block) return {};
  try {
    const tags: unknown = await exifr.parse(block, {
      tiff: true,
      exif: true,
      interop: true,
      gps: false,
      xmp: false,
      icc: false,
      iptc: false,
      mergeOutput: false,
      sanitize: false,
      translateKeys: false,
      translateValues: false,
      reviveValues: false,
    });
    return typeof tags === 'object' && tags !== null ? tags : {};
  } catch {
    // Metadata too damaged to read says nothing; the picture may still be sound.
    return {};
  }
}

/** JPEG and WebP blocks begin with "Exif\0\0", others with the TIFF header. */
function withoutPrefix(exif: Uint8Array): Uint8Array {
  return exif[0] === 0x45 && exif[1] === 0x78 ? exif.subarray(6) : exif;
}

function refuseUnmeasurable(format: Format, metadata: Metadata, tags: ExifTags): void {
  const { width, height, space } = metadata;
  if (format === 'tiff' && isRaw(tags)) {
    throw new MeasurementError(
      'raw-file',
      'This is a raw file. Set the camera to JPEG and use the JPEG as the camera wrote it.',
    );
  }
  if ((metadata.pages ?? 1) > 1) {
    throw format === 'tiff'
      ? new MeasurementError(
          'several-pages',
          'The TIFF file holds several pictures. Save the one to be measured as a file of its own.',
        )
      : new MeasurementError(
          'animated',
          'This is an animation. Use a single photograph as the camera wrote it.',
        );
  }
  if (space === 'cmyk') {
    throw new MeasurementError(
      'cmyk',
      'The picture is in printing colours (CMYK). Use the camera’s own file, which is in RGB.',
    );
  }
  if (space === 'b-w' || space === 'grey16' || metadata.channels < 3) {
    throw new MeasurementError(
      'no-colour',
      'The picture is black and white. Set the camera to colour and photograph it again.',
    );
  }
  if (!['srgb', 'rgb', 'rgb16'].includes(space ?? '') || !isIntegerDepth(metadata.depth)) {
    throw new MeasurementError(
      'unsupported-depth',
      'The pixels are stored in a form no camera writes. Use the camera’s own file, or save as 8- or 16-bit RGB.',
    );
  }
  if (width * height > maxPixels) {
    throw new MeasurementError(
      'too-large',
      `The picture has ${Math.round((width * height) / 1e6)} megapixels; at most ${maxPixels / 1e6} can be measured. Choose a smaller picture size on the camera.`,
    );
  }
  if (Math.min(width, height) < minSide) {
    throw new MeasurementError(
      'too-small',
      `The picture has only ${width} × ${height} pixels. Use the camera’s full-size file.`,
    );
  }
}

/** Raw files are TIFF inside: a DNG version, a colour filter array, or a reduced picture with the rest in sub-directories. */
function isRaw(tags: ExifTags): boolean {
  const ifd0 = tags.ifd0 ?? {};
  const photometric = ifd0[0x0106];
  const reduced = Number(ifd0[0x00fe] ?? 0) % 2 === 1;
  const hasParts = ifd0[0x014a] !== undefined;
  return ifd0[0xc612] !== undefined || photometric === 32_803 || (reduced && hasParts);
}

function isIntegerDepth(depth: string | undefined): boolean {
  return depth === 'uchar' || depth === 'ushort';
}

interface ColourChoice {
  space: ColourSpace;
  /** The colour engine must convert to sRGB, because the profile is made of tables. */
  convert: boolean;
  warnings: Warning[];
}

function chooseColourSpace(metadata: Metadata, tags: ExifTags, maxCode: number): ColourChoice {
  const srgb = { space: srgbSpace(maxCode), convert: false };
  if (metadata.icc) {
    const reading = readProfile(metadata.icc, maxCode);
    if (reading.kind === 'matrix') return { space: reading.space, convert: false, warnings: [] };
    if (reading.kind === 'table') {
      return { ...srgb, convert: true, warnings: [tableProfile] };
    }
    return { ...srgb, warnings: [unreadableProfile] };
  }
  const told = readColourSpace(tags);
  if (told === 'adobe-rgb') {
    return { space: adobeRgbSpace(maxCode), convert: false, warnings: [] };
  }
  return { ...srgb, warnings: told === 'srgb' ? [] : [noColourSpace] };
}

const tableProfile: Warning = {
  code: 'profile-converted',
  message:
    'The file’s colour profile works by tables, so the picture was converted to sRGB before measuring. Set the camera to sRGB.',
};
const unreadableProfile: Warning = {
  code: 'profile-unreadable',
  message:
    'The file’s colour profile could not be read, so sRGB was assumed. Use the file as the camera wrote it.',
};
const noColourSpace: Warning = {
  code: 'colour-space-assumed',
  message:
    'The file does not name its colour space, so sRGB was assumed. Use the file as the camera wrote it.',
};

async function readPixels(
  bytes: Uint8Array,
  maxCode: number,
  convert: boolean,
): Promise<Pick<Frame, 'width' | 'height' | 'data'>> {
  // Warnings of the decoder count as errors: a picture with damaged blocks must not be graded.
  const picture = sharp(bytes, {
    ignoreIcc: !convert,
    failOn: 'warning',
    limitInputPixels: maxPixels,
  })
    .autoOrient()
    .removeAlpha();
  const wide = maxCode > 255;
  try {
    const { data, info } = await rawPixels(picture, wide, convert);
    const view = wide
      ? new Uint16Array(data.buffer, data.byteOffset, data.byteLength / 2)
      : new Uint8Array(data.buffer, data.byteOffset, data.byteLength);
    return { width: info.width, height: info.height, data: view };
  } catch {
    throw damaged();
  }
}

function rawPixels(picture: Sharp, wide: boolean, convert: boolean) {
  if (wide) {
    const ushort = picture.toColourspace('rgb16').raw({ depth: 'ushort' });
    return ushort.toBuffer({ resolveWithObject: true });
  }
  const converted = convert ? picture.toColourspace('srgb') : picture;
  return converted.raw().toBuffer({ resolveWithObject: true });
}

function damaged(): MeasurementError {
  return new MeasurementError(
    'damaged-file',
    'The file is damaged or cut off and could not be read to its end. Copy it from the card again.',
  );
}
