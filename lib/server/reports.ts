import 'server-only';
import { createHash, randomBytes } from 'node:crypto';
import canonicalize from 'canonicalize';
import type { Transaction } from 'sequelize';
import type { z } from 'zod';
import type { Actor, ReportRow } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import type { PublicReport, ReportContent } from '@/lib/shared/report';
import type { withdrawSchema } from '@/lib/shared/schemas';
import type { Unit } from '@/models/bench';
import type { Report, ReportVersion } from '@/models/grading';
import { demand, inShop } from './access';
import { change, record } from './audit';
import { db } from './db';
import { moveUnit } from './moves';
import { reportContent } from './report-content';
import { reportFacts } from './report-facts';
import { copyPictures } from './report-pictures';
import { storedPicture } from './stored-picture';
import { unitByTag } from './unit-rows';

/** Freezes a graded unit's report as canonical JSON (RFC 8785) beside its SHA-256, and puts it on the public address. */
export async function publish(actor: Actor, tag: string): Promise<ReportRow> {
  demand(actor, 'report.publish');
  const reportId = await change(actor, async (transaction) => {
    const unit = await unitByTag(actor, tag);
    if (unit.state !== 'graded') {
      throw new UserError('conflict', `Only a graded unit can be published; ${tag} isn’t.`);
    }
    const facts = await reportFacts(actor, unit);
    const report = await reportOf(actor, unit, transaction);
    const version =
      1 + (await db().ReportVersion.count({ where: inShop(actor, { reportId: report.id }) }));
    const publishedAt = new Date();
    const { shown, stored } = await copyPictures(facts, report.slug, version);
    const content = canonical(
      reportContent(facts, {
        slug: report.slug,
        version,
        publishedAt: publishedAt.toISOString(),
        pictures: shown,
      }),
    );
    await db().ReportVersion.create(
      {
        ...inShop(actor, { reportId: report.id, gradeId: facts.grade.id, version, content }),
        sha256: sha256(content),
        pictures: stored,
        publishedById: actor.userId,
        publishedAt,
      },
      { transaction },
    );
    await report.update(
      { withdrawnAt: null, withdrawReason: null, withdrawnById: null },
      { transaction },
    );
    await record(transaction, actor, 'report.publish', ['Report', report.id], {
      tag,
      version,
      sha256: sha256(content),
    });
    await moveUnit(transaction, actor, unit, 'published');
    return report.id;
  });
  return rowOf(await reportById(actor, reportId));
}

const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');

function canonical(content: ReportContent): string {
  const text = canonicalize(content);
  if (!text) throw new Error('The report could not be written as canonical JSON.');
  return text;
}

/** The unit's report, with an address of 70 bits that can't be guessed. */
async function reportOf(actor: Actor, unit: Unit, transaction: Transaction): Promise<Report> {
  const where = inShop(actor, { unitId: unit.id });
  const known = await db().Report.findOne({ where, transaction });
  return known ?? db().Report.create({ ...where, slug: newSlug() }, { transaction });
}

/** Crockford's base 32: no letters that are misread. */
const slugDigits = '0123456789abcdefghjkmnpqrstvwxyz';
function newSlug(): string {
  return [...randomBytes(14)].map((byte) => slugDigits[byte % 32]).join('');
}

/** Says for good that a report no longer stands; its page stays and shows why. */
export async function withdraw(
  actor: Actor,
  slug: string,
  { reason }: z.output<typeof withdrawSchema>,
): Promise<ReportRow> {
  demand(actor, 'report.withdraw');
  const reportId = await change(actor, async (transaction) => {
    const report = await db().Report.findOne({
      where: inShop(actor, { slug }),
      include: [{ association: 'unit', include: ['cameraModel'] }],
    });
    if (!report?.unit) throw new UserError('notFound', 'No such report in this shop.');
    if (report.withdrawnAt) throw new UserError('conflict', 'This report is withdrawn already.');
    await report.update(
      { withdrawnAt: new Date(), withdrawReason: reason, withdrawnById: actor.userId },
      { transaction },
    );
    await record(transaction, actor, 'report.withdraw', ['Report', report.id], { slug, reason });
    if (report.unit.state === 'published')
      await moveUnit(transaction, actor, report.unit, 'graded');
    return report.id;
  });
  return rowOf(await reportById(actor, reportId));
}

/** The shop's reports, newest publication first. */
export async function listReports(actor: Actor): Promise<ReportRow[]> {
  demand(actor, 'report.read');
  const reports = await db().Report.findAll({ where: inShop(actor), include: reportParts });
  return reports
    .map(rowOf)
    .toSorted((a, b) => Date.parse(b.publishedAt) - Date.parse(a.publishedAt));
}

const reportParts = [
  { association: 'versions', include: ['grade'] },
  { association: 'unit', include: ['cameraModel'] },
];

async function reportById(actor: Actor, id: string): Promise<Report> {
  const where = inShop(actor, { id });
  const report = await db().Report.findOne({ where, include: reportParts });
  if (!report) throw new UserError('notFound', 'No such report in this shop.');
  return report;
}

function rowOf(report: Report): ReportRow {
  const version = newestOf(report);
  const { unit } = report;
  if (!version?.grade || !unit?.cameraModel)
    throw new Error('A report was read without its parts.');
  return {
    slug: report.slug,
    tag: unit.tag,
    maker: unit.cameraModel.maker,
    model: unit.cameraModel.name,
    letter: version.grade.letter,
    version: version.version,
    publishedAt: version.publishedAt.toISOString(),
    withdrawnAt: report.withdrawnAt?.toISOString() ?? null,
  };
}

const newestOf = (report: Report): ReportVersion | undefined =>
  report.versions?.toSorted((a, b) => b.version - a.version)[0];

/** For anyone: the frozen content as published last, and whether it still stands. */
export async function readReport(slug: string): Promise<PublicReport | null> {
  const report = await db().Report.findOne({ where: { slug }, include: ['versions'] });
  const newest = report && newestOf(report);
  if (!newest) return null;
  return {
    content: JSON.parse(newest.content) as ReportContent,
    json: newest.content,
    sha256: newest.sha256,
    withdrawn: report.withdrawnAt
      ? { at: report.withdrawnAt.toISOString(), reason: report.withdrawReason ?? '' }
      : null,
    versions: (report.versions ?? [])
      .toSorted((a, b) => a.version - b.version)
      .map(({ version, publishedAt, sha256 }) => ({
        version,
        publishedAt: publishedAt.toISOString(),
        sha256,
      })),
  };
}

/** For anyone: a picture of the version that was published last. */
export async function reportPicture(
  slug: string,
  name: string,
  request: Request,
): Promise<Response> {
  const report = await db().Report.findOne({ where: { slug }, include: ['versions'] });
  const newest = report && newestOf(report);
  const picture = newest?.pictures.find((candidate) => candidate.name === name);
  if (!newest || !picture) throw new UserError('notFound', 'No such picture.');
  const etag = `"${newest.sha256.slice(0, 16)}-${name}"`;
  return storedPicture(request, picture, etag, 'public, max-age=300');
}
