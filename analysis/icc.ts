import { bradford, rgbToXyz, whiteD65, xyzToSrgb } from './colour/cie.ts';
import { multiply } from './colour/matrix.ts';
import { linearTable } from './colour/srgb.ts';

/** The profile connection space's D50 (ICC.1, 7.2.16), to four decimals as profiles hold it. */
const pcsWhite = [0.9642, 1, 0.8249] as const;

/** How a file's codes become linear light and its primaries sRGB's; see `Frame`. */
export interface ColourSpace {
  readonly toLinear: readonly [Float32Array, Float32Array, Float32Array];
  readonly toSrgb: readonly number[] | null;
}

/**
 * Reading of an embedded profile:
 * `matrix` — three curves and a matrix (ICC.1 matrix/TRC model), ready to use;
 * `table` — colour goes through look-up tables, which a colour engine must apply;
 * `unreadable` — not an RGB profile, or damaged.
 */
export type ProfileReading =
  | { readonly kind: 'matrix'; readonly space: ColourSpace }
  | { readonly kind: 'table' }
  | { readonly kind: 'unreadable' };

export function srgbSpace(maxCode: number): ColourSpace {
  const table = linearTable(maxCode);
  return { toLinear: [table, table, table], toSrgb: null };
}

/** Adobe RGB (1998): gamma 563/256 and its own green primary, white D65 (from the published encoding, constants from memory). */
export function adobeRgbSpace(maxCode: number): ColourSpace {
  const table = curveTable((code) => code ** (563 / 256), maxCode);
  const matrix = multiply(xyzToSrgb, rgbToXyz([0.64, 0.33, 0.21, 0.71, 0.15, 0.06], whiteD65));
  return { toLinear: [table, table, table], toSrgb: matrix };
}

/**
 * Reads an ICC profile (ICC.1:2022, versions 2 and 4 alike).
 * A profile within 0.002 of sRGB's matrix and curve counts as sRGB, so that its files take the short way.
 */
export function readProfile(bytes: Uint8Array, maxCode: number): ProfileReading {
  try {
    return readTags(new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength), maxCode);
  } catch (error) {
    // A read beyond the end of a damaged profile.
    if (error instanceof RangeError) return { kind: 'unreadable' };
    throw error;
  }
}

function readTags(view: DataView, maxCode: number): ProfileReading {
  if (text(view, 36) !== 'acsp' || text(view, 16) !== 'RGB ') return { kind: 'unreadable' };
  const tags = tagOffsets(view);
  // As colour engines do: a profile that brings tables means them to be used.
  if (tags.has('A2B0')) return { kind: 'table' };
  const columns = ['rXYZ', 'gXYZ', 'bXYZ'].map((name) => readXyz(view, tags.get(name)));
  const curves = ['rTRC', 'gTRC', 'bTRC'].map((name) => readCurve(view, tags.get(name)));
  const [red, green, blue] = columns;
  const [redCurve, greenCurve, blueCurve] = curves;
  if (!red || !green || !blue || !redCurve || !greenCurve || !blueCurve) {
    return { kind: 'unreadable' };
  }
  const toXyz = [0, 1, 2].flatMap((row) => [red[row]!, green[row]!, blue[row]!]);
  const matrix = multiply(xyzToSrgb, multiply(bradford(pcsWhite, whiteD65), toXyz));
  return {
    kind: 'matrix',
    space: {
      toLinear: [
        nearestTable(redCurve, maxCode),
        nearestTable(greenCurve, maxCode),
        nearestTable(blueCurve, maxCode),
      ],
      toSrgb: isIdentity(matrix) ? null : matrix,
    },
  };
}

function tagOffsets(view: DataView): Map<string, number> {
  const count = Math.min(view.getUint32(128), 200);
  const offsets = new Map<string, number>();
  for (let i = 0; i < count; i++) {
    const entry = 132 + 12 * i;
    offsets.set(text(view, entry), view.getUint32(entry + 4));
  }
  return offsets;
}

function readXyz(view: DataView, offset: number | undefined): number[] | null {
  if (offset === undefined || text(view, offset) !== 'XYZ ') return null;
  return [8, 12, 16].map((at) => fixed(view, offset + at));
}

type Curve = (code: number) => number;

function readCurve(view: DataView, offset: number | undefined): Curve | null {
  if (offset === undefined) return null;
  const type = text(view, offset);
  if (type === 'curv') return readSampledCurve(view, offset);
  if (type === 'para') return readParametricCurve(view, offset);
  return null;
}

function readSampledCurve(view: DataView, offset: number): Curve {
  const count = view.getUint32(offset + 8);
  if (count === 0) return (code) => code;
  if (count === 1) {
    const gamma = view.getUint16(offset + 12) / 256;
    return (code) => code ** gamma;
  }
  if (count > 65_536) throw new RangeError('curve too long');
  const samples = Float64Array.from(
    { length: count },
    (_, i) => view.getUint16(offset + 12 + 2 * i) / 65_535,
  );
  return (code) => {
    const position = code * (count - 1);
    const before = Math.min(Math.floor(position), count - 2);
    const share = position - before;
    return samples[before]! * (1 - share) + samples[before + 1]! * share;
  };
}

/** The five functions of ICC.1 parametricCurveType, all cases of (a·x + b)^g + e above d and c·x + f below. */
function readParametricCurve(view: DataView, offset: number): Curve | null {
  const kind = view.getUint16(offset + 8);
  const counts = [1, 3, 4, 5, 7];
  const count = counts[kind];
  if (count === undefined) return null;
  const p = Array.from({ length: count }, (_, i) => fixed(view, offset + 12 + 4 * i));
  const g = p[0]!;
  if (kind === 0) return (x) => x ** g;
  const a = p[1]!;
  const b = p[2]!;
  const power = (x: number) => Math.max(0, a * x + b) ** g;
  if (kind === 1) return (x) => (x >= -b / a ? power(x) : 0);
  if (kind === 2) return (x) => power(Math.max(x, -b / a)) + p[3]!;
  const c = p[3]!;
  const d = p[4]!;
  const e = p[5] ?? 0;
  const f = p[6] ?? 0;
  return (x) => (x >= d ? power(x) + e : c * x + f);
}

function nearestTable(curve: Curve, maxCode: number): Float32Array {
  const srgb = linearTable(maxCode);
  const table = curveTable(curve, maxCode);
  return table.every((value, code) => Math.abs(value - srgb[code]!) < 0.002) ? srgb : table;
}

function curveTable(curve: Curve, maxCode: number): Float32Array {
  return Float32Array.from({ length: maxCode + 1 }, (_, code) => {
    const value = curve(code / maxCode);
    if (!Number.isFinite(value)) throw new RangeError('curve out of range');
    return Math.min(1, Math.max(0, value));
  });
}

function isIdentity(m: readonly number[]): boolean {
  return m.every((value, i) => Math.abs(value - (i % 4 === 0 ? 1 : 0)) < 0.002);
}

function text(view: DataView, offset: number): string {
  return String.fromCharCode(...[0, 1, 2, 3].map((i) => view.getUint8(offset + i)));
}

function fixed(view: DataView, offset: number): number {
  return view.getInt32(offset) / 65_536;
}
