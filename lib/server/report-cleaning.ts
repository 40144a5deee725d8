import 'server-only';

/** What a buyer compares with the camera in hand: the last four characters, and never more than half of a short serial. */
export function serialEnding(serial: string): string {
  return serial.slice(serial.length - Math.min(4, Math.floor(serial.length / 2)));
}

const escapeRegex = (text: string) => text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');

/**
 * Takes out of every text of a report what people may have typed into the log but may not be public: the full serial
 * and the names of the shop's members.
 */
export function cleaned<T>(content: T, secrets: { serial: string; names: readonly string[] }): T {
  const { serial, names } = secrets;
  const replacements: [RegExp, string][] = [
    ...(serial.length >= 4
      ? [[new RegExp(escapeRegex(serial), 'gi'), `…${serialEnding(serial)}`] as [RegExp, string]]
      : []),
    ...names
      .filter((name) => name.length >= 3)
      .map((name): [RegExp, string] => [
        new RegExp(`(?<!\\p{L})${escapeRegex(name)}(?!\\p{L})`, 'giu'),
        'a member of the shop',
      ]),
  ];
  const clean = (value: unknown): unknown => {
    if (typeof value === 'string') {
      return replacements.reduce((text, [pattern, word]) => text.replace(pattern, word), value);
    }
    if (Array.isArray(value)) return value.map(clean);
    if (value !== null && typeof value === 'object') {
      return Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, clean(inner)]));
    }
    return value;
  };
  return clean(content) as T;
}
