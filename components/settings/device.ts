const browsers = [
  ['Edg/', 'Edge'],
  ['Firefox/', 'Firefox'],
  ['Chrome/', 'Chrome'],
  ['Safari/', 'Safari'],
] as const;
const systems = [
  ['Android', 'Android'],
  ['iPhone', 'iPhone'],
  ['iPad', 'iPad'],
  ['Windows', 'Windows'],
  ['Mac OS', 'Mac'],
  ['Linux', 'Linux'],
] as const;

/** A browser's own description in two words; good enough to tell one's sessions apart. */
export function deviceOf(userAgent: string): string {
  const browser = browsers.find(([mark]) => userAgent.includes(mark))?.[1];
  const system = systems.find(([mark]) => userAgent.includes(mark))?.[1];
  if (!browser && !system) return 'Unknown browser';
  return [browser ?? 'A browser', system ? `on ${system}` : null].filter(Boolean).join(' ');
}
