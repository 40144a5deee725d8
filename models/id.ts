import { randomBytes } from 'node:crypto';

const digits = '0123456789abcdefghjkmnpqrstvwxyz'; // Crockford's base 32: no i, l, o, u

/**
 * A new identifier: 26 characters, 10 of time (milliseconds) and 16 of chance, so that identifiers sort by age
 * and an index grows at its end.
 */
export function newId(now: number = Date.now()): string {
  let time = '';
  for (let rest = now, i = 0; i < 10; i++, rest = Math.floor(rest / 32)) {
    time = digits.charAt(rest % 32) + time;
  }
  let chance = '';
  for (const byte of randomBytes(16)) chance += digits.charAt(byte % 32);
  return time + chance;
}
