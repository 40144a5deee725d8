import { cn } from './cn';

const thin = '\u2009';
const minus = '\u2212';

/** A number with its sign as typeset: −0.68. `signed` also shows the plus. */
export function formatNumber(value: number, decimals: number, signed = false): string {
  const text = Math.abs(value).toFixed(decimals);
  const isZero = Number(text) === 0;
  if (value < 0 && !isZero) return minus + text;
  return signed && !isZero ? `+${text}` : text;
}

const unitWords: Record<string, string> = { '1': '', deg: '°', ΔE00: 'ΔE' };

/** "−0.68 ± 0.06 EV": thin space before the unit, none before a degree sign. */
export function formatWithDoubt(
  value: number,
  expanded: number | null,
  unit: string,
  decimals: number,
): string {
  const doubt = expanded === null ? '' : ` ± ${formatNumber(expanded, decimals)}`;
  const word = unitWords[unit] ?? unit;
  const space = word === '' || word === '°' ? '' : thin;
  return `${formatNumber(value, decimals)}${doubt}${space}${word}`;
}

/** As many decimals as the doubt's first figure asks for, so that no digit is shown that nothing stands behind. */
export function decimalsFor(expanded: number | null): number {
  if (expanded === null || expanded <= 0) return 2;
  return Math.min(4, Math.max(0, -Math.floor(Math.log10(expanded))));
}

/** A measured value with its doubt (expanded uncertainty) and unit; never breaks over a line. */
export function Measured({
  value,
  expanded = null,
  unit,
  decimals,
  className,
}: {
  value: number;
  expanded?: number | null;
  unit: string;
  decimals: number;
  className?: string;
}) {
  return (
    <span className={cn('whitespace-nowrap tabular-nums', className)}>
      {formatWithDoubt(value, expanded, unit, decimals)}
    </span>
  );
}
