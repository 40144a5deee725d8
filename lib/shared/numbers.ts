/** Between a number and its unit. Archivo draws the narrow U+202F with hardly any width, so the plain no-break space. */
export const gap = '\u00a0';
const minus = '\u2212';

/** A number with its sign as typeset: −0.68. */
export function numberText(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? minus + text : text;
}

/** A second figure of the doubt isn't worth more decimals than this. */
const finest = 3;

/**
 * As many decimals as the doubt's first figure asks for, so that no digit is shown that nothing stands behind.
 * Where that figure is a 1 the next one is kept too: rounding it away could change the doubt by half (JCGM 100, 7.2.6).
 */
export function decimalsOf(expanded: number, most: number): number {
  if (expanded <= 0) return most;
  const place = Math.floor(Math.log10(expanded));
  const leading = Math.round(expanded / 10 ** place);
  const kept = leading === 1 && -place < finest ? 1 - place : -place;
  return Math.min(most, Math.max(0, kept));
}

const unitWords: Record<string, string> = { '1': '', deg: '°', ΔE00: 'ΔE' };

/** "−0.68 EV"; no space before a degree sign. */
export function withUnit(text: string, unit: string): string {
  const word = unitWords[unit] ?? unit;
  return `${text}${word === '' || word === '°' ? '' : gap}${word}`;
}

const mostPlaces = 4;

/** "−0.68 ± 0.06 EV", to the figures that the doubt allows. Without a doubt worth four places, a whole number is just that, another has `decimals`. */
export function withDoubt(value: number, expanded: number, unit: string, decimals = 3): string {
  if (Number(expanded.toFixed(mostPlaces)) === 0) {
    return withUnit(numberText(value, Number.isInteger(value) ? 0 : decimals), unit);
  }
  const places = decimalsOf(expanded, mostPlaces);
  return withUnit(`${numberText(value, places)} ± ${numberText(expanded, places)}`, unit);
}
