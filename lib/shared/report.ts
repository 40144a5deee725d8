import type { Edge, StationPlot } from '@/analysis/result';
import type { CheckOutcome, Letter, Standing } from './words';

/**
 * The frozen content of one published report: everything the public page shows, and nothing that may not be public
 * (no costs, staff names, GPS or full serial). Stored as canonical JSON (RFC 8785) beside its SHA-256.
 */
export interface ReportContent {
  format: 'mendlight-report';
  formatVersion: 1;
  slug: string;
  version: number;
  publishedAt: string;
  shop: { name: string };
  unit: {
    tag: string;
    maker: string;
    model: string;
    modelClass: string;
    serialEnding: string;
    accessories: string[];
  };
  grade: {
    letter: Letter;
    overridden: boolean;
    reason: string | null;
    signedByBenchWorker: boolean;
    schemeName: string;
    schemeVersion: number;
  };
  headline: string;
  summary: string;
  good: ReportPoint[];
  weak: ReportPoint[];
  repair: { fault: string; work: string[]; parts: string[] };
  checks: { label: string; outcome: CheckOutcome; note: string | null }[];
  rules: RuleOutcome[];
  measurements: ReportMeasurement[];
  frame: FramePicture | null;
  curves: { label: string; weak: boolean; frequency: number[]; response: number[] }[];
  tone: { reflectance: number; code: number; used: boolean }[];
  colours: {
    id: string;
    kind: string;
    reference: [number, number, number];
    measured: [number, number, number];
    deltaE2000: number;
    rgb: [number, number, number];
  }[];
  histogram: number[];
  /** Pictures served at /r/<slug>/pictures/<name>, re-encoded without metadata. */
  pictures: { name: string; label: string; width: number; height: number; alt: string }[];
  capture: {
    testedOn: string;
    shots: number;
    targetShots: number;
    settings: string;
    print: string;
  };
  originals: { name: string; sha256: string; bytes: number }[];
  cautions: string[];
  analysisVersion: string;
}

export interface ReportPoint {
  standing: Standing;
  title: string;
  text: string;
}

export interface ReportMeasurement {
  name: string;
  zone: string | null;
  label: string;
  source: string;
  /** Ready to read: "−0.68 ± 0.06 EV". */
  text: string;
  value: number;
  expanded: number;
  unit: string;
  n: number;
}

/** The frame drawn with its stations: sharpness as arcs against `fullCircle`, fringes as hairs. */
export interface FramePicture {
  width: number;
  height: number;
  /** mtf50 in cy/px that closes a ring, and what it stands for. */
  fullCircle: number;
  fullCircleMeans: 'peers' | 'centre';
  stations: (Pick<StationPlot, 'id' | 'x' | 'y' | 'mtf50' | 'red' | 'blue'> & { weak: boolean })[];
}

/** One rule of a scheme met by one unit's results. */
export interface RuleOutcome {
  ruleId: string;
  label: string;
  quantity: string;
  zone: string | null;
  edge: Edge | null;
  /** null: not tested; never a pass. */
  value: number | null;
  unit: string;
  /** Combined standard uncertainty, expanded uncertainty, and effective degrees of freedom (JCGM 100). */
  standardUncertainty: number | null;
  expanded: number | null;
  degreesOfFreedom: number | null;
  n: number;
  /** Each grade's limits: [lowest, highest], null is open. */
  limits: { letter: 'A' | 'B' | 'C'; low: number | null; high: number | null }[];
  /** Scale to draw on. */
  scale: { min: number; max: number };
  /** The best grade this rule still clearly allows. */
  allows: Letter;
  /** Against the limit of the grade proposed by the other rules. */
  standing: Standing | 'untested';
  /** Distance to the nearest limit of `allows`, in the rule's unit; positive inside. */
  margin: number | null;
  /** Why, in a plain sentence. */
  sentence: string;
  /** How many more shots would settle a doubt; null when none is needed. */
  moreShots: number | null;
  effect: 'cap' | 'bar';
  peers: number[];
}

/** What anyone may read at a report's address: the frozen content, its bytes and hash, and the one live fact. */
export interface PublicReport {
  content: ReportContent;
  /** Exactly the bytes that `sha256` is of. */
  json: string;
  sha256: string;
  /** null: it stands. */
  withdrawn: { at: string; reason: string } | null;
  /** Every publication, oldest first. */
  versions: { version: number; publishedAt: string; sha256: string }[];
}
