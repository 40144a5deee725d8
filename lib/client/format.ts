import { gap } from '@/lib/shared/numbers';

const days = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeZone: 'UTC' });

/** 14 Mar 2026, in UTC, so that server and browser write the same. */
export const day = (iso: string) => days.format(new Date(iso));

/** How long ago, in one unit: "3 days". */
export function age(iso: string, now: number): string {
  const minutes = Math.max(0, Math.floor((now - Date.parse(iso)) / 60_000));
  const [count, word] =
    minutes < 60
      ? [minutes, 'minute']
      : minutes < 48 * 60
        ? [Math.floor(minutes / 60), 'hour']
        : [Math.floor(minutes / 1440), 'day'];
  return `${count} ${word}${count === 1 ? '' : 's'}`;
}

function fractionDigits(currency: string): number {
  return (
    new Intl.NumberFormat('en-GB', { style: 'currency', currency }).resolvedOptions()
      .maximumFractionDigits ?? 2
  );
}

/** Minor units as money: 4250, EUR → "€42.50". */
export function money(minor: number, currency: string): string {
  return new Intl.NumberFormat('en-GB', { style: 'currency', currency }).format(
    minor / 10 ** fractionDigits(currency),
  );
}

/** Minor units as a person would type them: 4250, EUR → "42.50". */
export function amountText(minor: number, currency: string): string {
  const digits = fractionDigits(currency);
  return (minor / 10 ** digits).toFixed(digits);
}

/** What a person typed as an amount, in minor units; undefined when empty, NaN when it is none. */
export function parseMoney(typed: string, currency: string): number | undefined {
  const text = typed.trim().replace(',', '.');
  if (text === '') return undefined;
  if (!/^\d+(\.\d+)?$/.test(text)) return Number.NaN;
  const minor = Number(text) * 10 ** fractionDigits(currency);
  const whole = Math.round(minor);
  return Math.abs(minor - whole) < 1e-6 ? whole : Number.NaN;
}

export function bytes(count: number): string {
  if (count < 1e6) return `${Math.max(1, Math.round(count / 1e3))}${gap}kB`;
  return `${(count / 1e6).toFixed(1)}${gap}MB`;
}

/** "about 9 s", "about 2 min". */
export function about(seconds: number): string {
  return seconds < 90 ? `about ${seconds}${gap}s` : `about ${Math.round(seconds / 60)}${gap}min`;
}

export function bookedTime(minutes: number): string {
  const hours = Math.floor(minutes / 60);
  const rest = minutes % 60;
  if (hours === 0) return `${rest}${gap}min`;
  return rest === 0 ? `${hours}${gap}h` : `${hours}${gap}h ${rest}${gap}min`;
}

/** A shutter time as cameras write it: 1/125 s, 2 s. */
export function exposureTime(seconds: number): string {
  if (seconds >= 0.35) return `${Number(seconds.toFixed(1))}${gap}s`;
  return `1/${Math.round(1 / seconds)}${gap}s`;
}
