import 'server-only';
import type { Actor, UnitDetail } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { ReportContent, RuleOutcome } from '@/lib/shared/report';
import type { Letter, ModelClass } from '@/lib/shared/words';
import type { Unit } from '@/models/bench';
import type { Grade } from '@/models/grading';
import type { Analysis, Run, Shot } from '@/models/testing';
import { inShop } from './access';
import { checkViews, newestChecks } from './checks';
import { db } from './db';
import { type PeerMeans, peersOf, resultsOfAnalyses, type Samples } from './results';

/** What a report is made from, read in one go. */
export interface ReportFacts {
  shop: { name: string };
  unit: {
    tag: string;
    maker: string;
    model: string;
    modelClass: ModelClass;
    serial: string;
    accessories: string[];
  };
  grade: {
    id: string;
    letter: Letter;
    proposed: Letter;
    reason: string | null;
    ownWork: boolean;
    schemeName: string;
    schemeVersion: number;
  };
  run: Run;
  shots: { kind: Shot['kind']; sha256: string; bytes: number }[];
  /** The sharpest of the target photographs that were graded. */
  best: Analysis;
  samples: Samples;
  peers: PeerMeans[];
  rules: readonly RuleOutcome[];
  checks: UnitDetail['checks'];
  repair: ReportContent['repair'];
  /** Names that may not appear. */
  staff: string[];
}

export async function reportFacts(actor: Actor, unit: Unit): Promise<ReportFacts> {
  const grade = await standingGrade(actor, unit);
  const { run, scheme, ruleResults, analysisIds } = grade;
  if (!run || !scheme || !unit.cameraModel) throw new Error('The grade was read without its run.');
  const [shots, best, samples, peers, checks, repair, staff] = await Promise.all([
    db().Shot.findAll({
      where: inShop(actor, { runId: run.id }),
      include: ['original'],
      order: [['addedAt', 'ASC']],
    }),
    sharpest(actor, analysisIds),
    resultsOfAnalyses(actor, analysisIds),
    peersOf(actor, unit),
    newestChecks(actor, unit.id),
    repairOf(actor, unit),
    staffOf(actor),
  ]);
  return {
    shop: { name: actor.shopName },
    unit: {
      tag: unit.tag,
      maker: unit.cameraModel.maker,
      model: unit.cameraModel.name,
      modelClass: unit.cameraModel.modelClass,
      serial: unit.serial,
      accessories: unit.accessories,
    },
    grade: {
      id: grade.id,
      letter: grade.letter,
      proposed: grade.proposed,
      reason: grade.reason ?? null,
      ownWork: grade.ownWork,
      schemeName: scheme.name,
      schemeVersion: scheme.version,
    },
    run,
    shots: shots.flatMap(({ kind, original }) =>
      original ? { kind, sha256: original.sha256, bytes: original.bytes } : [],
    ),
    best,
    samples,
    peers,
    rules: (ruleResults ?? [])
      .toSorted((a, b) => a.position - b.position)
      .map(({ outcome }) => outcome),
    checks: checkViews(checks),
    repair,
    staff,
  };
}

async function standingGrade(actor: Actor, unit: Unit): Promise<Grade> {
  const grade = await db().Grade.findOne({
    where: inShop(actor, { standingUnitId: unit.id }),
    include: ['run', 'scheme', 'ruleResults'],
  });
  if (!grade) throw new UserError('conflict', `${unit.tag} has no signed grade to publish.`);
  return grade;
}

async function sharpest(actor: Actor, ids: string[]): Promise<Analysis> {
  const analyses = await db().Analysis.findAll({ where: inShop(actor, { id: ids }) });
  const middle = ({ metrics }: Analysis) =>
    metrics.find(({ name, zone }) => name === 'sharpness.mtf50' && zone === 'centre')?.value ?? 0;
  const best = analyses.toSorted((a, b) => middle(b) - middle(a))[0];
  if (!best) throw new UserError('conflict', 'The graded photographs are missing.');
  return best;
}

/** Actions and parts of the log as they read after amendment; other entries are the shop's own notes. */
async function repairOf(actor: Actor, unit: Unit): Promise<ReportContent['repair']> {
  const log = await db().LogEntry.findAll({
    where: inShop(actor, { unitId: unit.id }),
    order: [['at', 'ASC']],
  });
  const amended = new Set(log.map((entry) => entry.amendsId));
  const texts = (kind: string) =>
    log.filter((entry) => entry.kind === kind && !amended.has(entry.id)).map(({ text }) => text);
  return { fault: unit.fault, work: texts('action'), parts: texts('part') };
}

async function staffOf(actor: Actor): Promise<string[]> {
  const members = await db().Membership.findAll({ where: inShop(actor), include: ['user'] });
  return members.flatMap(({ user }) => (user ? [user.name, user.email] : []));
}
