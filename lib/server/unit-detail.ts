import 'server-only';
import type { Actor, LogEntryView, UnitDetail } from '@/lib/shared/api';
import type { Unit } from '@/models/bench';
import { inShop, may, movesOf } from './access';
import { checkViews, newestChecks } from './checks';
import { db } from './db';
import { logView } from './log';
import { openStates } from './moves';
import { runRows } from './run-rows';
import { signingOf } from './signing';
import { unitRow } from './unit-rows';

/** Everything the unit's page shows. */
export async function unitDetail(actor: Actor, unit: Unit): Promise<UnitDetail> {
  const [row, log, changes, checks, runs, gradeSigned, report, signing] = await Promise.all([
    unitRow(actor, unit),
    logOf(actor, unit.id),
    changesOf(actor, unit.id),
    newestChecks(actor, unit.id),
    runRows(actor, unit.id),
    standingGrade(actor, unit.id),
    reportOf(actor, unit.id),
    signingOf(actor, unit),
  ]);
  const open = openStates.includes(unit.state);
  const moveTo = [...movesOf(actor, unit.state)];
  return {
    ...row,
    source: unit.source ?? null,
    priceMinor: unit.priceMinor ?? null,
    accessories: unit.accessories,
    condition: unit.condition ?? null,
    receivedBy: unit.receivedBy?.name ?? '',
    spentMinor: (unit.priceMinor ?? 0) + sum(log, (entry) => entry.costMinor),
    minutes: sum(log, (entry) => entry.minutes),
    log,
    changes,
    checks: checkViews(checks),
    runs,
    gradeSigned,
    report,
    may: {
      edit: may(actor, 'unit.edit'),
      log: open && may(actor, 'log.add'),
      check: open && may(actor, 'check.save'),
      test: open && may(actor, 'run.create'),
      send: moveTo.includes('awaiting-grade'),
      sign: signing.allowed,
      publish: may(actor, 'report.publish') && unit.state === 'graded',
      withdraw: may(actor, 'report.withdraw') && report !== null && report.withdrawnAt === null,
      moveTo,
    },
    signRefusal: signing.refusal,
  };
}

/** An amended entry's minutes and cost count only as amended. */
function sum(log: readonly LogEntryView[], of: (entry: LogEntryView) => number | null): number {
  const amended = new Set(log.map((entry) => entry.amends));
  return log
    .filter((entry) => !amended.has(entry.id))
    .reduce((total, entry) => total + (of(entry) ?? 0), 0);
}

async function logOf(actor: Actor, unitId: string): Promise<LogEntryView[]> {
  const rows = await db().LogEntry.findAll({
    where: inShop(actor, { unitId }),
    include: ['by'],
    order: [['at', 'ASC']],
  });
  return rows.map((row) => logView(row, row.by?.name ?? ''));
}

async function changesOf(actor: Actor, unitId: string): Promise<UnitDetail['changes']> {
  const rows = await db().StateChange.findAll({
    where: inShop(actor, { unitId }),
    include: ['by'],
    order: [['at', 'ASC']],
  });
  return rows.map((row) => ({
    from: row.fromState,
    to: row.toState,
    at: row.at.toISOString(),
    by: row.by?.name ?? '',
    note: row.note ?? null,
  }));
}

async function standingGrade(actor: Actor, unitId: string): Promise<UnitDetail['gradeSigned']> {
  const grade = await db().Grade.findOne({
    where: inShop(actor, { standingUnitId: unitId }),
    include: ['signedBy'],
  });
  if (!grade) return null;
  const { letter, proposed, reason, signedBy, signedAt } = grade;
  return {
    letter,
    proposed,
    reason: reason ?? null,
    by: signedBy?.name ?? '',
    at: signedAt.toISOString(),
  };
}

async function reportOf(actor: Actor, unitId: string): Promise<UnitDetail['report']> {
  const report = await db().Report.findOne({
    where: inShop(actor, { unitId }),
    include: ['versions'],
  });
  const newest = report?.versions?.toSorted((a, b) => b.version - a.version)[0];
  if (!report || !newest) return null;
  return {
    slug: report.slug,
    version: newest.version,
    publishedAt: newest.publishedAt.toISOString(),
    withdrawnAt: report.withdrawnAt?.toISOString() ?? null,
  };
}
