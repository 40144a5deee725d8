import { quantities } from '@/analysis/quantities';
import { combineRepeats, type Repeat } from '@/analysis/statistics/combine';
import { numberText, withDoubt, withUnit } from '../numbers';
import type { RuleOutcome } from '../report';
import { functionCheckItems, type Letter } from '../words';
import type { Evidence } from './evidence';
import type { CheckRule, Limits, MeasuredRule, Rule } from './scheme';
import { shotsToSettle, standingOf, type Uncertain } from './standing';

const grades = ['A', 'B', 'C'] as const;

/** A rule met by the evidence; `outcome.standing` is settled once the proposed grade is known. */
export interface Judged {
  rule: Rule;
  /** null: not tested. */
  result: Uncertain | null;
  outcome: RuleOutcome;
}

export function judge(rule: Rule, evidence: Evidence, risk: number): Judged {
  return rule.of === 'checks'
    ? judgeChecks(rule, evidence, risk)
    : judgeMeasured(rule, evidence, risk);
}

function judgeMeasured(rule: MeasuredRule, evidence: Evidence, risk: number): Judged {
  const { quantity, zone, edge } = rule;
  const repeats = evidence.measured(quantity, zone, edge);
  const unit = quantities.get(quantity)?.unit ?? '1';
  const place = { quantity, zone, edge, unit, peers: evidence.peers(quantity, zone, edge) };
  if (!repeats) {
    return untested(
      rule,
      place,
      'Not tested: no photograph of the run shows it, so it counts for nothing.',
    );
  }
  const combined = combineRepeats(repeats);
  const result: Uncertain = { ...combined, value: combined.mean };
  const moreShots = shotsToAsk(rule, result, repeats, risk);
  const text = withDoubt(result.value, combined.expanded, unit, quantities.get(quantity)?.decimals);
  return {
    rule,
    result,
    outcome: {
      ...common(rule, place),
      value: result.value,
      standardUncertainty: result.standardUncertainty,
      expanded: combined.expanded,
      degreesOfFreedom: Number.isFinite(result.degreesOfFreedom) ? result.degreesOfFreedom : null,
      n: combined.n,
      ...verdict(rule, result, risk, text, unit, moreShots),
      moreShots,
    },
  };
}

function judgeChecks(rule: CheckRule, evidence: Evidence, risk: number): Judged {
  const place = { quantity: 'checks.failed', zone: null, edge: null, unit: '1', peers: [] };
  const missing = rule.items.filter((item) => !evidence.checks.has(item));
  if (missing.length > 0) {
    const names = missing.map((item) => labelOf(item)).join(', ');
    return untested(
      rule,
      place,
      `Not tested: ${missing.length} of ${rule.items.length} checks are still to be made (${names}).`,
    );
  }
  const failed = rule.items.filter((item) => evidence.checks.get(item) === 'fail');
  const result: Uncertain = {
    value: failed.length,
    standardUncertainty: 0,
    degreesOfFreedom: Number.POSITIVE_INFINITY,
  };
  const { allows, margin } = verdict(rule, result, risk, '', '1', null);
  const sentence =
    failed.length === 0
      ? 'Everything on this list was tried and works, or isn’t fitted.'
      : `Failed: ${failed.map((item) => labelOf(item)).join(', ')}.`;
  return {
    rule,
    result,
    outcome: {
      ...common(rule, place),
      value: failed.length,
      standardUncertainty: 0,
      expanded: 0,
      degreesOfFreedom: null,
      n: 1,
      allows,
      margin,
      sentence,
      moreShots: null,
    },
  };
}

type Place = Pick<RuleOutcome, 'quantity' | 'zone' | 'edge' | 'unit' | 'peers'>;

function common(rule: Rule, place: Place) {
  return {
    ruleId: rule.id,
    label: rule.label,
    ...place,
    limits: grades.map((letter) => ({
      letter,
      low: rule.limits[letter][0],
      high: rule.limits[letter][1],
    })),
    scale: rule.scale,
    standing: 'untested' as const,
    effect: rule.effect,
  };
}

/** What was not tested is never a pass: it allows no more than failing would. */
function untested(rule: Rule, place: Place, sentence: string): Judged {
  return {
    rule,
    result: null,
    outcome: {
      ...common(rule, place),
      value: null,
      standardUncertainty: null,
      expanded: null,
      degreesOfFreedom: null,
      n: 0,
      allows: worstOf(rule),
      margin: null,
      sentence,
      moreShots: null,
    },
  };
}

const worstOf = (rule: Rule): Letter => (rule.effect === 'bar' ? 'Parts' : 'C');

/** The best grade clearly allowed, how far its limit is, and why not a better one. */
function verdict(
  rule: Rule,
  result: Uncertain,
  risk: number,
  text: string,
  unit: string,
  moreShots: number | null,
): Pick<RuleOutcome, 'allows' | 'margin' | 'sentence'> {
  const standings = grades.map((letter) => standingOf(result, rule.limits[letter], risk));
  const best = grades[standings.indexOf('within')];
  const allows = best ?? worstOf(rule);
  const margin = marginOf(result.value, rule.limits[best ?? 'C']);
  if (best === 'A') {
    return {
      allows,
      margin,
      sentence: `${text} is clearly within A’s limits, ${range(rule.limits.A, unit)}.`,
    };
  }
  const missed = best ? (best === 'B' ? 'A' : 'B') : 'C';
  const limit = range(rule.limits[missed], unit);
  const counts =
    allows === 'Parts' ? 'bars it from sale as a working camera' : `counts as ${allows}`;
  const doubt = standings[grades.indexOf(missed)] === 'doubt';
  const settle =
    moreShots === null
      ? 'more photographs alone would not settle it'
      : `${moreShots} more ${moreShots === 1 ? 'photograph' : 'photographs'} of the target would settle it`;
  return {
    allows,
    margin,
    sentence: doubt
      ? `${text} may lie on either side of ${missed}’s limit, ${limit}, so it ${counts}; ${settle}.`
      : `${text} is clearly outside ${missed}’s limits, ${limit}, so it ${counts}.`,
  };
}

function shotsToAsk(
  rule: Rule,
  result: Uncertain,
  repeats: readonly Repeat[],
  risk: number,
): number | null {
  for (const letter of grades) {
    const standing = standingOf(result, rule.limits[letter], risk);
    if (standing === 'within') return null;
    if (standing === 'doubt') return shotsToSettle(repeats, rule.limits[letter], risk);
  }
  return null;
}

/** Distance to the nearest limit, positive inside. */
export function marginOf(value: number, [low, high]: Limits): number {
  return Math.min(
    low === null ? Number.POSITIVE_INFINITY : value - low,
    high === null ? Number.POSITIVE_INFINITY : high - value,
  );
}

/** Limits in words, with as many decimals as they need: "at most 5 ΔE", "at least 65 %", "−1.0 to 0.4 EV". */
export function range([low, high]: Limits, unit: string): string {
  const decimals = Math.max(decimalsIn(low), decimalsIn(high));
  if (low === null) return withUnit(`at most ${numberText(high ?? 0, decimals)}`, unit);
  if (high === null) return withUnit(`at least ${numberText(low, decimals)}`, unit);
  return withUnit(`${numberText(low, decimals)} to ${numberText(high, decimals)}`, unit);
}

const decimalsIn = (limit: number | null) => String(limit ?? 0).split('.')[1]?.length ?? 0;

const labelOf = (id: string) => functionCheckItems.find((item) => item.id === id)?.label ?? id;
