import { quantities } from '@/analysis/quantities';
import type { RuleOutcome } from './report';

/** One rule's quantity in two runs of the same unit. */
export interface Change {
  rule: RuleOutcome;
  earlier: RuleOutcome;
  /** Later less earlier, in the quantity's unit. */
  by: number;
  /** Expanded: the two runs' doubts are independent, so their squares add (JCGM 100, 5.1.2). */
  expanded: number;
  /** `same` where the difference lies within its doubt. */
  verdict: 'better' | 'worse' | 'same';
}

/** What changed from one run to another, rule by rule; rules without a value in both are left out. */
export function changes(earlier: readonly RuleOutcome[], later: readonly RuleOutcome[]): Change[] {
  const before = new Map(earlier.map((rule) => [rule.ruleId, rule]));
  return later.flatMap((rule) => {
    const was = before.get(rule.ruleId);
    if (!was || was.value === null || rule.value === null) return [];
    if (!quantities.has(rule.quantity)) return [];
    const by = rule.value - was.value;
    const expanded = Math.hypot(was.expanded ?? 0, rule.expanded ?? 0);
    const verdict =
      Math.abs(by) <= expanded ? 'same' : gain(was.value, rule) > 0 ? 'better' : 'worse';
    return [{ rule, earlier: was, by, expanded, verdict }];
  });
}

/** How much nearer to good the later value lies. */
function gain(was: number, { quantity, value }: RuleOutcome): number {
  const now = value ?? was;
  const good = quantities.get(quantity)?.good ?? 'low';
  if (good === 'high') return now - was;
  const ideal = good === 'low' ? 0 : good;
  return Math.abs(was - ideal) - Math.abs(now - ideal);
}

/** "Exposure is better; 2 others are worse": the comparison's headline. */
export function changeHeadline(all: readonly Change[]): string {
  const labels = (verdict: Change['verdict']) =>
    all.filter((change) => change.verdict === verdict).map((change) => change.rule.label);
  const parts = [told(labels('better'), 'better'), told(labels('worse'), 'worse')].filter(Boolean);
  return parts.length ? parts.join('; ') : 'No difference beyond the doubt';
}

function told(labels: readonly string[], word: string): string {
  const [only] = labels;
  if (labels.length === 0 || only === undefined) return '';
  return labels.length === 1 ? `${only}: ${word}` : `${labels.length} results are ${word}`;
}
