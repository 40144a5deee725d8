import { quantities } from '@/analysis/quantities';
import { stopsInWords } from './findings';
import { listOf } from './grading/propose';
import { standingOf } from './grading/standing';
import { decimalsOf, gap, numberText } from './numbers';
import { placeWords } from './places';
import type { ReportContent, ReportPoint, RuleOutcome } from './report';
import {
  goodFirst,
  headlines,
  type Line,
  near,
  openings,
  type TopicId,
  type TopicWords,
  topics,
  unsaidBeside,
  worthKnowing,
} from './report-topics';
import type { Letter, Standing } from './words';

/** What the words are made from, beside the rules' outcomes. */
export interface WordFacts {
  letter: Letter;
  rules: readonly RuleOutcome[];
  checks: ReportContent['checks'];
  /** How many function checks were not made. */
  unchecked: number;
  /** The weakest corner and its sharpness over the middle's, 0…1; null when unknown. */
  weakest: { station: string; share: number } | null;
}

export type ReportWords = Pick<ReportContent, 'headline' | 'summary' | 'good' | 'weak'>;

const mostPoints = 3;
const risk = 0.05;

interface Told {
  id: TopicId;
  rule: RuleOutcome;
  value: number;
  standing: Standing;
  /**
   * Room inside A's limits: 1 at the ideal, 0 at the limit, and beyond it negative by the distance from A's to C's.
   * Where more is always better there is no ideal, and that distance measures both sides.
   */
  room: number;
}

/** Headline, summary and points of a report, from the rules' outcomes alone. */
export function reportWords(facts: WordFacts): ReportWords {
  const told = topicsTold(facts.rules);
  const weak = told
    .filter((one) => one.standing !== 'within' || one.room < (worthKnowing[one.id] ?? near))
    .slice(0, mostPoints);
  const weakIds = new Set(weak.map(({ id }) => id));
  const good = told
    .filter((one) => one.standing === 'within' && !weakIds.has(one.id))
    .filter(({ id }) => !unsaidBeside[id]?.some((other) => weakIds.has(other)))
    .toSorted((a, b) => goodFirst.indexOf(a.id) - goodFirst.indexOf(b.id))
    .slice(0, mostPoints);
  return {
    headline: headlineOf(facts.letter, told),
    summary: summaryOf(facts, told),
    good: good.map((one) => pointOf(one, topics[one.id].good, facts)),
    weak: weak.map((one) => pointOf(one, weakLine(one), facts)),
  };
}

/** One entry a topic, by its weakest rule; the weakest topic first. */
function topicsTold(rules: readonly RuleOutcome[]): Told[] {
  const ids = Object.keys(topics) as TopicId[];
  return ids
    .flatMap((id) => {
      const mine = rules.filter((rule) =>
        (topics[id].quantities as readonly string[]).includes(rule.quantity),
      );
      return mine
        .flatMap((rule) => toldOf(id, rule))
        .toSorted(weakestFirst)
        .slice(0, 1);
    })
    .toSorted(weakestFirst);
}

const order: Standing[] = ['outside', 'doubt', 'within'];
const weakestFirst = (a: Told, b: Told) =>
  order.indexOf(a.standing) - order.indexOf(b.standing) || a.room - b.room;

function toldOf(id: TopicId, rule: RuleOutcome): Told[] {
  const [a, , c] = rule.limits;
  if (rule.value === null || rule.standardUncertainty === null || !a || !c) return [];
  const { value, standardUncertainty } = rule;
  const degreesOfFreedom = rule.degreesOfFreedom ?? Number.POSITIVE_INFINITY;
  const result = { value, standardUncertainty, degreesOfFreedom };
  const standing = standingOf(result, [a.low, a.high], risk);
  const good = quantities.get(rule.quantity)?.good ?? 'low';
  const ideal = good === 'low' ? 0 : good;
  const room = Math.min(
    roomBelow(value, a.high, c.high, ideal),
    ideal === 'high'
      ? roomBelow(-value, negated(a.low), negated(c.low), ideal)
      : roomBelow(-value, negated(a.low), negated(c.low), -ideal),
  );
  return [{ id, rule, value, standing, room }];
}

const negated = (limit: number | null) => (limit === null ? null : -limit);

function roomBelow(value: number, a: number | null, c: number | null, ideal: number | 'high') {
  if (a === null || c === null) return Number.POSITIVE_INFINITY;
  const inside = value <= a && ideal !== 'high';
  return (a - value) / ((inside ? a - ideal : Math.abs(c - a)) || 1);
}

/** The topic's words for the side of ideal on which the value lies. */
function weakLine({ id, rule, value }: Told): Line {
  const words: TopicWords = topics[id];
  const good = quantities.get(rule.quantity)?.good ?? 'low';
  const side = good === 'high' || (good !== 'low' && value < good) ? 'low' : 'high';
  return words[side] ?? words.good;
}

function pointOf(one: Told, line: Line, facts: WordFacts): ReportPoint {
  const places = placesOf(one, facts);
  return {
    standing: one.standing,
    title: fill(line.title, places),
    text: fill(line.text, places),
  };
}

function placesOf({ rule, value }: Told, { weakest }: WordFacts): Record<string, string> {
  const decimals = decimalsOf(rule.expanded ?? 0, quantities.get(rule.quantity)?.decimals ?? 2);
  const size = Math.abs(value);
  const corner = weakest ? (placeWords[weakest.station] ?? 'one') : 'one';
  return {
    value: orLess(value, decimals),
    size: orLess(size, decimals),
    stops: stopsInWords(value) || `${numberText(size, 2)} EV`,
    compensation: compensation(value),
    percent: numberText(Math.abs(value - 100), 0),
    corner: corner.charAt(0).toUpperCase() + corner.slice(1),
    cornerShare: weakest ? numberText(weakest.share * 100, 0) : '–',
    seen: seen(size),
    noticed: noticed(size),
    peers: against(rule, value),
  };
}

/** To the nearest third of a stop, as cameras are set. */
function compensation(bias: number): string {
  const ev = Math.round(-bias * 3) / 3;
  return `${ev > 0 ? '+' : ''}${numberText(ev, 1)}`;
}

/** "less than 0.01" where the digits shown would all be noughts. */
function orLess(value: number, decimals: number): string {
  const text = numberText(value, decimals);
  return Number(text) === 0 ? `less than ${numberText(10 ** -decimals, decimals)}` : text;
}

/** A mean colour difference in words (common practice, no source). */
function noticed(deltaE: number): string {
  if (deltaE < 2) return 'hardly to be seen';
  return deltaE < 4 ? 'seen only side by side' : 'seen at a second look';
}

/** Pixels of a fringe in words (common practice, no source). */
function seen(pixels: number): string {
  if (pixels < 0.7) return 'hardly visible';
  return pixels < 1.5 ? 'visible in large prints' : 'visible at full size on a screen';
}

/** Peers are mentioned when there are at least three and this unit beats more than half of them. */
function against(rule: RuleOutcome, value: number): string {
  if (rule.peers.length < 3) return '';
  const high = quantities.get(rule.quantity)?.good === 'high';
  const beaten = rule.peers.filter((peer) =>
    high ? value > peer : Math.abs(value) < Math.abs(peer),
  );
  return beaten.length > rule.peers.length / 2 ? ', better than most others of this model' : '';
}

/** Puts the places in; a number stays on one line with its unit. */
const fill = (template: string, places: Record<string, string>) =>
  template
    .replace(/\{(\w+)\}/g, (_, name: string) => places[name] ?? '')
    .replace(/(\d) (?=%|EV|dB|ΔE|ΔC|cycles|pixels)/g, `$1${gap}`);

function headlineOf(letter: Letter, told: readonly Told[]): string {
  const weak = new Set(told.filter((one) => one.standing !== 'within').map((one) => one.id));
  const first = headlines.find(
    (headline) =>
      (!headline.letter || headline.letter === letter) &&
      (headline.weak ?? []).every((id) => weak.has(id)),
  );
  return first?.text ?? '';
}

function summaryOf(facts: WordFacts, told: readonly Told[]): string {
  return [openings[facts.letter], adviceOf(told, facts), checksSentence(facts)]
    .filter(Boolean)
    .join(' ');
}

/** The one thing to know first: exposure, because it can be set right, else the weakest point. */
function adviceOf(told: readonly Told[], facts: WordFacts): string {
  const weak = told.filter((one) => one.standing !== 'within');
  const exposure = weak.find((one) => one.id === 'exposure');
  const stops = exposure && stopsInWords(exposure.value).toLowerCase();
  if (exposure && stops) {
    const side = exposure.value < 0 ? 'dark' : 'light';
    return `Automatic exposure runs about ${stops} ${side}, so set compensation to ${compensation(exposure.value)}.`;
  }
  const first = weak[0];
  if (!first) return '';
  const { title, text } = pointOf(first, weakLine(first), facts);
  return `${title.replace(/\.$/, '')}: ${text.charAt(0).toLowerCase()}${text.slice(1)}`;
}

function checksSentence({ checks, unchecked }: WordFacts): string {
  const failed = checks.filter((check) => check.outcome === 'fail').map((check) => check.label);
  const untried =
    unchecked === 0
      ? ''
      : ` ${unchecked} ${unchecked === 1 ? 'function was' : 'functions were'} not tried.`;
  if (failed.length > 0) return `Not working: ${listOf(failed).toLowerCase()}.${untried}`;
  if (checks.length === 0) return 'Its functions were not tried.';
  if (unchecked > 0) return `What was tried works.${untried}`;
  return 'Everything the hand can operate was tried and works.';
}
