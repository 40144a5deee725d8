/**
 * The sRGB transfer curve and luminance weights (IEC 61966-2-1).
 * `code` is the encoded value 0…1 of full scale, `linear` is light 0…1 of the white.
 */
export function toLinear(code: number): number {
  return code <= 0.04045 ? code / 12.92 : ((code + 0.055) / 1.055) ** 2.4;
}

export function toCode(linear: number): number {
  return linear <= 0.0031308 ? linear * 12.92 : 1.055 * linear ** (1 / 2.4) - 0.055;
}

/** Y of linear sRGB. */
export function luminance(red: number, green: number, blue: number): number {
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

/** Code level of a correctly exposed mid-tone, 461/1000 of full scale (ISO 12232, CIPA DC-004), which 8 bits round to 118. */
export const midToneCode = 118 / 255;

/** Reflectance of the mid grey that a correct exposure renders at `midToneCode` (ISO 12232). */
export const midGrey = 0.18;

/** Code → linear for every code of a depth; the same array for the same depth. */
export function linearTable(maxCode: number): Float32Array {
  const known = tables.get(maxCode);
  if (known) return known;
  const table = Float32Array.from({ length: maxCode + 1 }, (_, code) => toLinear(code / maxCode));
  tables.set(maxCode, table);
  return table;
}

const tables = new Map<number, Float32Array>();
