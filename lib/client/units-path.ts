import { type UnitQuery, unitQuerySchema } from '@/lib/shared/schemas';

export const unitsPath = (search: string) =>
  search === '' ? '/api/units' : `/api/units?${search}`;

/** Query of a unit list from what stands in the address; nonsense falls back to the defaults. */
export function unitQueryOf(search: URLSearchParams | Record<string, unknown>): UnitQuery {
  const values = search instanceof URLSearchParams ? Object.fromEntries(search) : search;
  const parsed = unitQuerySchema.safeParse(values);
  return parsed.success ? parsed.data : unitQuerySchema.parse({});
}

/** The address of a query: only what differs from the defaults, so that links stay short. */
export function searchOf(query: UnitQuery): string {
  const defaults: Record<string, unknown> = unitQuerySchema.parse({});
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(query)) {
    if (value === undefined || value === '' || value === defaults[key]) continue;
    search.set(key, String(value));
  }
  return search.toString();
}
