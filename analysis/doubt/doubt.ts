import type { Metric, Warning } from '../result.ts';

/** What speaks against a photograph: said in warnings, quantities that are left out, and such as are told less surely. */
export interface Doubt {
  readonly warnings: readonly Warning[];
  /** Names of quantities, or beginnings of names with a dot at the end (`colour.`). */
  readonly withdrawn: readonly string[];
  /** Relative standard uncertainty that is added to quantities, named likewise. */
  readonly widened?: readonly { readonly name: string; readonly relative: number }[];
}

export const noDoubt: Doubt = { warnings: [], withdrawn: [] };

/** The metrics that stand, and how surely. */
export function applyDoubts(metrics: readonly Metric[], doubts: readonly Doubt[]): Metric[] {
  const withdrawn = doubts.flatMap((doubt) => doubt.withdrawn);
  const widened = doubts.flatMap((doubt) => doubt.widened ?? []);
  return metrics
    .filter(({ name }) => !withdrawn.some((pattern) => matches(pattern, name)))
    .map((metric) => {
      const added = widened.filter(({ name }) => matches(name, metric.name));
      if (added.length === 0) return metric;
      const shares = added.map(({ relative }) => relative * metric.value);
      return { ...metric, uncertainty: Math.hypot(metric.uncertainty, ...shares) };
    });
}

function matches(pattern: string, name: string): boolean {
  return pattern.endsWith('.') ? name.startsWith(pattern) : name === pattern;
}
