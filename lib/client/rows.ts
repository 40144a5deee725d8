'use client';

import { useShortcuts } from './shortcuts';

/** Moves along the links marked `data-row`; Enter then opens the one that has the focus. */
export function focusRow(step: 1 | -1): void {
  const rows = [...document.querySelectorAll<HTMLElement>('[data-row]')].filter(
    (row) => row.offsetParent !== null,
  );
  const here = rows.indexOf(document.activeElement as HTMLElement);
  const next = here < 0 ? (step > 0 ? 0 : rows.length - 1) : here + step;
  rows[Math.min(rows.length - 1, Math.max(0, next))]?.focus();
}

/** Arrow keys for a list whose rows carry `data-row`. */
export function useRowKeys(what: string): void {
  useShortcuts([
    { key: 'ArrowDown', label: `Next ${what}`, run: () => focusRow(1) },
    {
      key: 'ArrowUp',
      label: `${what.charAt(0).toUpperCase()}${what.slice(1)} before`,
      run: () => focusRow(-1),
    },
  ]);
}
