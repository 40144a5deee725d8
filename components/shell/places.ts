import type { StateCounts } from '@/lib/shared/api';
import type { Role, UnitState } from '@/lib/shared/words';

export interface Place {
  href: string;
  label: string;
  key: string;
  count: number | null;
}

const sum = (counts: StateCounts, states: readonly UnitState[]) =>
  states.reduce((total, state) => total + counts[state], 0);

/** Where one can go, with how much waits there. A refurbisher does not grade, so has no queue. */
export function placesFor(role: Role, counts: StateCounts): Place[] {
  const places = [
    { href: '/arrivals', label: 'Arrivals', count: counts.received },
    { href: '/bench', label: 'Bench', count: sum(counts, ['on-the-bench', 'testing']) },
    { href: '/grading', label: 'Grading', count: counts['awaiting-grade'] },
    { href: '/published', label: 'Published', count: null },
    { href: '/targets', label: 'Target', count: null },
    { href: '/settings', label: 'Settings', count: null },
  ];
  return places
    .filter((place) => role !== 'refurbisher' || place.href !== '/grading')
    .map((place, i) => ({ ...place, key: String(i + 1) }));
}

/** Units and their runs belong to the bench, whatever page they were reached from. */
export function isHere(path: string, href: string): boolean {
  if (path === href || path.startsWith(`${href}/`)) return true;
  return href === '/bench' && path.startsWith('/units');
}
