/** Narrow no-break space, between a number and its unit. */
const thin = '\u202f';
const minus = '\u2212';

/** A number with its sign as typeset: −0.68. */
export function numberText(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? minus + text : text;
}

/** As many decimals as the doubt's first figure asks for, so that no digit is shown that nothing stands behind. */
export function decimalsOf(expanded: number, most: number): number {
  if (expanded <= 0) return most;
  return Math.min(most, Math.max(0, -Math.floor(Math.log10(expanded))));
}

const unitWords: Record<string, string> = { '1': '', deg: '°', ΔE00: 'ΔE' };

/** "−0.68 EV"; no space before a degree sign. */
export function withUnit(text: string, unit: string): string {
  const word = unitWords[unit] ?? unit;
  return `${text}${word === '' || word === '°' ? '' : thin}${word}`;
}

/** "−0.68 ± 0.06 EV"; a count without doubt is just the number. */
export function withDoubt(value: number, expanded: number, unit: string, most = 3): string {
  if (expanded === 0) return withUnit(numberText(value, Number.isInteger(value) ? 0 : most), unit);
  const decimals = decimalsOf(expanded, most);
  return withUnit(`${numberText(value, decimals)} ± ${numberText(expanded, decimals)}`, unit);
}
