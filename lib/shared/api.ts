import type { Capture } from '@/analysis/image';
import type { Kind, Metric, Plots, RegistrationSummary, Warning } from '@/analysis/result';
import type { RuleOutcome } from './report';
import type {
  CheckOutcome,
  Letter,
  LogKind,
  ModelClass,
  Role,
  ShotState,
  UnitState,
} from './words';

/** What the verbs of lib/server return and the API answers, as JSON. Times are ISO 8601 UTC with milliseconds. */
export interface Actor {
  userId: string;
  sessionId: string;
  shopId: string;
  shopName: string;
  currency: string;
  role: Role;
  name: string;
  email: string;
}

export interface UnitRow {
  tag: string;
  maker: string;
  model: string;
  modelClass: ModelClass;
  serial: string;
  state: UnitState;
  fault: string;
  grade: Letter | null;
  receivedAt: string;
  changedAt: string;
  /** Thumbnail of the newest analysed target shot, or null. */
  picture: string | null;
}
export interface Page<T> {
  rows: T[];
  total: number;
  page: number;
  pageSize: number;
}
export type StateCounts = Record<UnitState, number>;

export interface UnitDetail extends UnitRow {
  source: string | null;
  priceMinor: number | null;
  accessories: string[];
  condition: string | null;
  receivedBy: string;
  spentMinor: number;
  minutes: number;
  log: LogEntryView[];
  changes: { from: UnitState | null; to: UnitState; at: string; by: string; note: string | null }[];
  checks: {
    item: string;
    label: string;
    outcome: CheckOutcome;
    note: string | null;
    at: string;
    by: string;
  }[];
  runs: RunRow[];
  gradeSigned: {
    letter: Letter;
    proposed: Letter;
    reason: string | null;
    by: string;
    at: string;
  } | null;
  report: { slug: string; version: number; publishedAt: string; withdrawnAt: string | null } | null;
  /** What the reader may do now, decided by the server. */
  may: {
    edit: boolean;
    log: boolean;
    check: boolean;
    test: boolean;
    send: boolean;
    sign: boolean;
    publish: boolean;
    withdraw: boolean;
    moveTo: UnitState[];
  };
  /** Why `sign` is false although the reader is a grader, or null. */
  signRefusal: string | null;
}
export interface LogEntryView {
  id: string;
  kind: LogKind;
  text: string;
  minutes: number | null;
  costMinor: number | null;
  at: string;
  by: string;
  amends: string | null;
}
export interface RunRow {
  id: string;
  title: string;
  phase: 'before' | 'after';
  startedAt: string;
  shots: number;
  done: number;
  failed: number;
}

export interface RunDetail extends RunRow {
  unit: UnitRow;
  shotList: ShotRow[];
  /** Proposed from the run's latest analyses; null while nothing is measured. */
  proposal: Proposal | null;
  /** Means over the run's target shots. */
  results: RunResult[];
  peers: { units: number };
  mayUpload: boolean;
}
export interface ShotRow {
  id: string;
  name: string;
  sha256: string;
  bytes: number;
  state: ShotState;
  kind: Kind | null;
  /** 0…1 while analysing. */
  progress: number;
  takenAt: string | null;
  addedAt: string;
  /** One sentence when the shot failed. */
  error: string | null;
  warnings: number;
  thumbnail: string | null;
  headline: string | null;
}
export interface RunResult {
  name: string;
  zone: string | null;
  edge: string | null;
  label: string;
  unit: string;
  mean: number;
  standardUncertainty: number;
  expanded: number;
  n: number;
  peers: number[];
}

export interface ShotDetail extends ShotRow {
  unit: UnitRow;
  runId: string;
  runTitle: string;
  previous: string | null;
  next: string | null;
  width: number | null;
  height: number | null;
  view: string | null;
  analyses: { id: string; version: string; at: string }[];
  analysis: {
    id: string;
    version: string;
    at: string;
    kind: Kind;
    width: number;
    height: number;
    capture: Capture;
    registration: RegistrationSummary | null;
    metrics: Metric[];
    warnings: Warning[];
    milliseconds: { decode: number; register: number; measure: number; total: number };
    plots: Plots;
    crops: { station: string; url: string; width: number; height: number }[];
  } | null;
}

export interface Proposal {
  letter: Letter;
  schemeName: string;
  schemeVersion: number;
  /** One sentence: what forces the grade. */
  sentence: string;
  rules: RuleOutcome[];
  inDoubt: number;
  untested: number;
}
export interface GradingRow extends UnitRow {
  runId: string;
  proposal: Proposal | null;
  sentAt: string;
  sentBy: string;
  maySign: boolean;
}
export interface ReportRow {
  slug: string;
  tag: string;
  maker: string;
  model: string;
  letter: Letter;
  version: number;
  publishedAt: string;
  withdrawnAt: string | null;
}
export interface MemberRow {
  id: string;
  name: string;
  email: string;
  role: Role;
  active: boolean;
  lastSeenAt: string | null;
}
export interface InvitationRow {
  id: string;
  email: string;
  role: Role;
  expiresAt: string;
}
export interface SessionRow {
  id: string;
  userAgent: string;
  startedAt: string;
  seenAt: string;
  current: boolean;
}
/** Server-sent events of a run: `event: shot` with a ShotRow, `event: run` when the proposal changed. */
export type RunEvent = { type: 'shot'; shot: ShotRow } | { type: 'run'; runId: string };
