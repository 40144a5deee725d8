import type { Edge } from '@/analysis/result';
import type { FunctionCheckId, ModelClass } from '../words';

/** [lowest, highest] that still earns a grade; null leaves that side open. */
export type Limits = readonly [number | null, number | null];

interface RuleBase {
  id: string;
  label: string;
  /** Each grade's limits; B holds A and C holds B. */
  limits: { A: Limits; B: Limits; C: Limits };
  /** Beyond C's limits: a `cap` holds the grade at C, a `bar` makes it Parts. */
  effect: 'cap' | 'bar';
  /** Where the limits come from. */
  reason: string;
  /** Range to draw. */
  scale: { min: number; max: number };
}

/** Judges one measured quantity of the run. */
export interface MeasuredRule extends RuleBase {
  of: 'measurement';
  quantity: string;
  zone: string | null;
  edge: Edge | null;
}

/** Judges the number of failed function checks among `items`. */
export interface CheckRule extends RuleBase {
  of: 'checks';
  items: FunctionCheckId[];
}

export type Rule = MeasuredRule | CheckRule;

/** A shop's grading rules for one class of camera. A signed grade keeps the whole scheme it was made with. */
export interface Scheme {
  id: string;
  name: string;
  version: number;
  modelClass: ModelClass;
  /** Largest accepted risk that a value said to lie within a limit lies outside it (JCGM 106). */
  risk: number;
  rules: Rule[];
}
