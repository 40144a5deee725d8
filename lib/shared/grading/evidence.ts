import type { Edge } from '@/analysis/result';
import type { Repeat } from '@/analysis/statistics/combine';
import type { CheckOutcome } from '../words';

/** What a unit's rules are judged by. */
export interface Evidence {
  /** One quantity at one place, as each photograph of the run shows it; null when none does. */
  measured(quantity: string, zone: string | null, edge: Edge | null): readonly Repeat[] | null;
  /** Means of the same quantity of other units of the model. */
  peers(quantity: string, zone: string | null, edge: Edge | null): number[];
  checks: ReadonlyMap<string, CheckOutcome>;
}
