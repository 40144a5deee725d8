import { apply, identity, invert, multiply, type Triple } from './matrix.ts';

/**
 * CIE colorimetry (CIE 15, ISO/CIE 11664-4): XYZ with Y = 1 for white, Bradford adaptation, CIELAB against D50.
 * D50 is CIE's (0.96422, 1, 0.82521) everywhere; ICC's (0.9642, 1, 0.8249) differs in the fourth decimal.
 */
export const whiteD50: Triple = [0.96422, 1, 0.82521];
/** From the chromaticity (0.3127, 0.3290) of IEC 61966-2-1. */
export const whiteD65: Triple = [0.3127 / 0.329, 1, (1 - 0.3127 - 0.329) / 0.329];

/** Linear sRGB to XYZ (D65), worked out from the primaries of IEC 61966-2-1. */
export const srgbToXyz = rgbToXyz([0.64, 0.33, 0.3, 0.6, 0.15, 0.06], whiteD65);
export const xyzToSrgb = inverse(srgbToXyz);

const cone = [0.8951, 0.2664, -0.1614, -0.7502, 1.7135, 0.0367, 0.0389, -0.0685, 1.0296];

/** Bradford adaptation of XYZ from one white to another (ICC.1 annex E). */
export function bradford(from: Triple, to: Triple): number[] {
  const source = apply(cone, from);
  const aim = apply(cone, to);
  const gain = [aim[0] / source[0], 0, 0, 0, aim[1] / source[1], 0, 0, 0, aim[2] / source[2]];
  return multiply(inverse(cone), multiply(gain, cone));
}

/** Linear RGB to XYZ for primaries [xr, yr, xg, yg, xb, yb] and a white. */
export function rgbToXyz(primaries: readonly number[], white: Triple): number[] {
  const columns = [0, 2, 4].map((i) => {
    const x = primaries[i]!;
    const y = primaries[i + 1]!;
    return [x / y, 1, (1 - x - y) / y];
  });
  const m = [0, 1, 2].flatMap((row) => columns.map((column) => column[row]!));
  const scale = apply(inverse(m), white);
  return m.map((value, i) => value * scale[i % 3]!);
}

export function xyzToLab([x, y, z]: Triple, white: Triple = whiteD50): [number, number, number] {
  const fx = labCurve(x / white[0]);
  const fy = labCurve(y / white[1]);
  const fz = labCurve(z / white[2]);
  return [116 * fy - 16, 500 * (fx - fy), 200 * (fy - fz)];
}

export function labToXyz([l, a, b]: Triple, white: Triple = whiteD50): [number, number, number] {
  const fy = (l + 16) / 116;
  return [
    white[0] * labCurveInverse(fy + a / 500),
    white[1] * labCurveInverse(fy),
    white[2] * labCurveInverse(fy - b / 200),
  ];
}

const srgbToXyzD50 = multiply(bradford(whiteD65, whiteD50), srgbToXyz);
const xyzD50ToSrgb = inverse(srgbToXyzD50);

/** Linear sRGB to CIELAB (D50), by Bradford. */
export function linearSrgbToLab(rgb: Triple): [number, number, number] {
  return xyzToLab(apply(srgbToXyzD50, rgb));
}

/** CIELAB (D50) to linear sRGB; outside 0…1 where sRGB can't show the colour. */
export function labToLinearSrgb(lab: Triple): [number, number, number] {
  return apply(xyzD50ToSrgb, labToXyz(lab));
}

export function chroma(lab: Triple): number {
  return Math.hypot(lab[1], lab[2]);
}

/** Hue angle in degrees, 0…360. */
export function hue(lab: Triple): number {
  const degrees = (Math.atan2(lab[2], lab[1]) * 180) / Math.PI;
  return degrees < 0 ? degrees + 360 : degrees;
}

function labCurve(t: number): number {
  return t > (6 / 29) ** 3 ? Math.cbrt(t) : t / (3 * (6 / 29) ** 2) + 4 / 29;
}

function labCurveInverse(f: number): number {
  return f > 6 / 29 ? f ** 3 : 3 * (6 / 29) ** 2 * (f - 4 / 29);
}

function inverse(m: readonly number[]): number[] {
  return invert(m) ?? [...identity];
}
