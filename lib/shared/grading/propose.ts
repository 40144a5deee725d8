import type { Proposal } from '../api';
import type { RuleOutcome } from '../report';
import { type Letter, letters } from '../words';
import type { Evidence } from './evidence';
import { type Judged, judge } from './judge';
import type { Limits, Scheme } from './scheme';
import { standingOf } from './standing';

const rank = (letter: Letter) => letters.indexOf(letter);
const worse = (a: Letter, b: Letter) => (rank(a) >= rank(b) ? a : b);

/** The grade that a scheme's rules propose: the worst that any of them forces. */
export function propose(scheme: Scheme, evidence: Evidence): Proposal {
  const judged = scheme.rules.map((rule) => judge(rule, evidence, scheme.risk));
  const letter = judged.map(({ outcome }) => outcome.allows).reduce(worse, 'A');
  const above = letterAbove(letter);
  const rules = judged.map((one) => withStanding(one, above, scheme.risk));
  return {
    letter,
    schemeName: scheme.name,
    schemeVersion: scheme.version,
    sentence: sentenceOf(letter, rules),
    rules,
    inDoubt: rules.filter((rule) => rule.standing === 'doubt').length,
    untested: rules.filter((rule) => rule.standing === 'untested').length,
  };
}

/** The grade that the proposed one falls short of; A where nothing is better. */
function letterAbove(letter: Letter): 'A' | 'B' | 'C' {
  if (letter === 'Parts') return 'C';
  return letter === 'C' ? 'B' : 'A';
}

function withStanding(
  { outcome, result, rule }: Judged,
  above: 'A' | 'B' | 'C',
  risk: number,
): RuleOutcome {
  const limits: Limits = rule.limits[above];
  return { ...outcome, standing: result ? standingOf(result, limits, risk) : 'untested' };
}

function sentenceOf(letter: Letter, rules: readonly RuleOutcome[]): string {
  if (letter === 'A') return 'Every rule clearly allows an A.';
  const forcing = rules.filter((rule) => rule.allows === letter);
  const untested = forcing.filter((rule) => rule.standing === 'untested');
  const tested = forcing.filter((rule) => rule.standing !== 'untested');
  const grade = letter === 'Parts' ? 'parts only' : letter;
  const reasons = [
    tested.length > 0 ? listOf(tested.map(reasonOf)) : '',
    untested.length > 0 ? `${listOf(untested.map((rule) => name(rule)))} not being tested` : '',
  ];
  return `Held at ${grade} by ${reasons.filter(Boolean).join(', and by ')}.`;
}

const name = (rule: RuleOutcome) => rule.label.charAt(0).toLowerCase() + rule.label.slice(1);
const reasonOf = (rule: RuleOutcome) =>
  rule.standing === 'doubt' ? `${name(rule)} (in doubt)` : name(rule);

export function listOf(words: readonly string[]): string {
  if (words.length < 2) return words.join('');
  return `${words.slice(0, -1).join(', ')} and ${words.at(-1)}`;
}
