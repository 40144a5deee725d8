import type { Capture } from './image.ts';

/** Exif fields by tag number, as the parser gave them: untranslated, rationals already divided. */
export interface ExifTags {
  readonly ifd0?: TagTable;
  readonly exif?: TagTable;
  readonly interop?: TagTable;
}
type TagTable = Readonly<Record<string, unknown>>;

/** What the metadata says of the colour space when no profile is embedded (CIPA DC-008). */
export type ExifColourSpace = 'srgb' | 'adobe-rgb' | 'unknown';

const programs: Readonly<Record<number, string>> = {
  1: 'manual',
  2: 'program',
  3: 'aperture-priority',
  4: 'shutter-priority',
  5: 'creative',
  6: 'action',
  7: 'portrait',
  8: 'landscape',
};

/**
 * The exposure's facts from Exif (CIPA DC-008), each null when absent, damaged or impossible:
 * a zero denominator, a negative time, a date that is none. Strings are cleaned of control characters and cut at 100.
 */
export function readCapture(tags: ExifTags): Capture {
  const ifd0 = tags.ifd0 ?? {};
  const exif = tags.exif ?? {};
  return {
    make: cleanText(ifd0[0x010f]),
    model: cleanText(ifd0[0x0110]),
    serial: cleanText(exif[0xa431]),
    exposureTime: within(exif[0x829a], 1e-7, 1e5),
    fNumber: within(exif[0x829d], 0.3, 1000),
    iso: readIso(exif),
    exposureBias: within(exif[0x9204], -20, 20),
    focalLength: within(exif[0x920a], 0.1, 1e5),
    takenAt: readTime(exif[0x9003] ?? exif[0x9004], exif[0x9291]),
    program: readProgram(exif),
    flash: typeof exif[0x9209] === 'number' ? (exif[0x9209] & 1) === 1 : null,
    software: cleanText(ifd0[0x0131]),
  };
}

export function readColourSpace(tags: ExifTags): ExifColourSpace {
  const space = tags.exif?.[0xa001];
  const index = cleanText(tags.interop?.[1]);
  if (space === 1) return 'srgb';
  return index === 'R03' ? 'adobe-rgb' : 'unknown';
}

function readIso(exif: TagTable): number | null {
  const short = Array.isArray(exif[0x8827]) ? exif[0x8827][0] : exif[0x8827];
  // 65535 says that the value is in one of the long fields (CIPA DC-008, PhotographicSensitivity).
  const candidates = short === 65_535 ? [exif[0x8833], exif[0x8832], exif[0x8831]] : [short];
  for (const candidate of candidates) {
    const iso = within(candidate, 1, 1e8);
    if (iso !== null) return iso;
  }
  return null;
}

function readProgram(exif: TagTable): string | null {
  const program = exif[0x8822];
  const named = typeof program === 'number' ? programs[program] : undefined;
  if (named) return named;
  return exif[0xa402] === 1 ? 'manual' : null;
}

function readTime(value: unknown, fraction: unknown): string | null {
  const parts = /^(\d{4}):(\d\d):(\d\d)[ T](\d\d):(\d\d):(\d\d)$/.exec(cleanText(value) ?? '');
  if (!parts) return null;
  const [year, month, day, hour, minute, second] = parts.slice(1).map(Number) as [
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  const date = new Date(Date.UTC(year, month - 1, day, hour, minute, second));
  const real =
    year >= 1990 &&
    date.getUTCMonth() === month - 1 &&
    date.getUTCDate() === day &&
    hour < 24 &&
    minute < 60 &&
    second < 60;
  if (!real) return null;
  const digits = /^\d{1,9}$/.exec(cleanText(fraction) ?? '')?.[0];
  const milliseconds = digits ? `.${digits.padEnd(3, '0').slice(0, 3)}` : '';
  return `${date.toISOString().slice(0, 19)}${milliseconds}`;
}

function within(value: unknown, low: number, high: number): number | null {
  if (typeof value !== 'number' || !Number.isFinite(value)) return null;
  return value >= low && value <= high ? value : null;
}

function cleanText(value: unknown): string | null {
  if (typeof value !== 'string') return null;
  const clean = value
    .replace(/[\p{Cc}\p{Cf}\p{Co}\p{Cs}\p{Zl}\p{Zp}]+/gu, ' ')
    .replace(/\s+/g, ' ')
    .trim();
  return clean === '' ? null : clean.slice(0, 100);
}
