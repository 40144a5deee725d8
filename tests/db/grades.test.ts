import canonicalize from 'canonicalize';
import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { firstBreak } from '@/lib/server/audit';
import { db } from '@/lib/server/db';
import { gradingQueue, proposeGrade, signGrade } from '@/lib/server/grades';
import { addLogEntry } from '@/lib/server/log';
import { listReports, publish, readReport, reportPicture, withdraw } from '@/lib/server/reports';
import { getRun } from '@/lib/server/runs';
import { updateShop } from '@/lib/server/shop';
import { changeState, getUnit } from '@/lib/server/units';
import { makeHouse, makeMember, sha256Of } from './house';
import { sent, takenIn, tested } from './journey';

let house: Awaited<ReturnType<typeof makeHouse>>;
beforeAll(async () => {
  house = await makeHouse();
});
afterAll(() => db().sequelize.close());

const dark = { 'exposure.bias': -0.68 };

describe('a proposal', () => {
  test('comes from the mean of the newest run after the repair', async () => {
    const { tag, runId } = await tested(house.refurbisher, { shots: 3, results: dark });
    const proposal = await proposeGrade(house.grader, tag);
    expect(proposal).toMatchObject({
      letter: 'B',
      schemeName: 'Small-sensor compacts',
      schemeVersion: 1,
    });
    const run = await getRun(house.grader, runId);
    expect(run.proposal).toEqual(proposal);
    const bias = run.results.find((result) => result.name === 'exposure.bias');
    expect(bias).toMatchObject({ mean: -0.68, n: 3, label: 'Exposure', unit: 'EV' });
    // Three shots that agree: the stated uncertainty over √3 (JCGM 100:2008, 4.2.3).
    expect(bias?.standardUncertainty).toBeCloseTo(0.004 / Math.sqrt(3), 9);
  });

  test('is null while nothing is measured', async () => {
    expect(await proposeGrade(house.grader, await takenIn(house.refurbisher))).toBeNull();
  });

  test('is set beside the same model’s other units in the same shop, and no others', async () => {
    const here = await makeHouse();
    const elsewhere = await makeHouse();
    await tested(here.refurbisher, { results: { 'noise.snr': 33 } });
    await tested(here.refurbisher, { results: { 'noise.snr': 35 } });
    await tested(elsewhere.refurbisher, { results: { 'noise.snr': 11 } });
    const { runId } = await tested(here.refurbisher);
    const run = await getRun(here.owner, runId);
    expect(run.peers.units).toBe(2);
    const noise = run.results.find((result) => result.name === 'noise.snr');
    expect(noise?.peers.toSorted()).toEqual([33, 35]);
    expect(run.proposal?.rules.find((rule) => rule.ruleId === 'noise')?.peers.toSorted()).toEqual([
      33, 35,
    ]);
  });
});

describe('signing', () => {
  test('by a second person moves the unit on and keeps scheme, rules and analyses', async () => {
    const { tag } = await sent(house.refurbisher, { results: dark });
    const queue = await gradingQueue(house.grader);
    expect(queue.find((row) => row.tag === tag)).toMatchObject({
      maySign: true,
      sentBy: house.refurbisher.name,
    });
    const unit = await signGrade(house.grader, tag, { letter: 'B' });
    expect(unit).toMatchObject({
      state: 'graded',
      grade: 'B',
      gradeSigned: { letter: 'B', proposed: 'B', by: house.grader.name },
    });
    const grade = await db().Grade.findOne({
      where: { shopId: house.shop.id, letter: 'B' },
      include: ['scheme', 'ruleResults'],
      order: [['signedAt', 'DESC']],
    });
    expect(grade?.analysisIds).toHaveLength(2);
    expect(grade?.scheme?.rules).toMatchObject({ version: 1 });
    expect(grade?.ruleResults?.length).toBeGreaterThanOrEqual(12);
    expect((await gradingQueue(house.grader)).map((row) => row.tag)).not.toContain(tag);
  });

  test('another grade than the proposed one needs a reason', async () => {
    const { tag } = await sent(house.refurbisher);
    await expect(signGrade(house.grader, tag, { letter: 'C' })).rejects.toMatchObject({
      code: 'invalid',
      fields: { reason: expect.any(String) },
    });
    const unit = await signGrade(house.grader, tag, {
      letter: 'C',
      reason: 'Scratched front element.',
    });
    expect(unit.gradeSigned).toMatchObject({
      letter: 'C',
      proposed: 'A',
      reason: 'Scratched front element.',
    });
  });

  test('of one’s own bench work is refused, unless the shop allows it; then the grade says so', async () => {
    const own = await makeHouse();
    const { tag } = await sent(own.owner);
    const before = await getUnit(own.owner, tag);
    expect(before.may.sign).toBe(false);
    expect(before.signRefusal).toContain('someone else has to sign');
    await expect(signGrade(own.owner, tag, { letter: 'A' })).rejects.toMatchObject({
      code: 'forbidden',
    });
    await updateShop(own.owner, { signOwnWork: true });
    await signGrade(own.owner, tag, { letter: 'A' });
    const grade = await db().Grade.findOne({ where: { shopId: own.shop.id }, rejectOnEmpty: true });
    expect(grade.ownWork).toBe(true);
  });

  test('one log entry is bench work enough', async () => {
    const own = await makeHouse();
    const { tag } = await tested(own.refurbisher);
    await addLogEntry(own.owner, tag, { kind: 'note', text: 'Looked at the shutter.' });
    await changeState(own.refurbisher, tag, { to: 'awaiting-grade' });
    await expect(signGrade(own.owner, tag, { letter: 'A' })).rejects.toMatchObject({
      code: 'forbidden',
    });
    await signGrade(own.grader, tag, { letter: 'A' });
  });

  test('happens once, even when two people press at the same time', async () => {
    const { tag } = await sent(house.refurbisher);
    const second = await makeMember(house.shop, 'grader');
    const results = await Promise.allSettled([
      signGrade(house.grader, tag, { letter: 'A' }),
      signGrade(second, tag, { letter: 'A' }),
    ]);
    expect(results.map((result) => result.status).toSorted()).toEqual(['fulfilled', 'rejected']);
  });

  test('a second grade supersedes the first', async () => {
    const { tag } = await sent(house.refurbisher);
    await signGrade(house.grader, tag, { letter: 'A' });
    await changeState(house.refurbisher, tag, { to: 'testing' });
    await changeState(house.refurbisher, tag, { to: 'awaiting-grade' });
    const unit = await signGrade(house.grader, tag, { letter: 'B', reason: 'Loose battery door.' });
    expect(unit.grade).toBe('B');
    const { id } = await db().Unit.findOne({
      where: { shopId: house.shop.id, tag },
      rejectOnEmpty: true,
    });
    const grades = await db().Grade.findAll({
      where: { unitId: id },
      order: [['signedAt', 'ASC']],
    });
    expect(grades.map((grade) => [grade.letter, grade.supersededAt === null])).toEqual([
      ['A', false],
      ['B', true],
    ]);
  });
});

async function published(results = {}) {
  const { tag } = await sent(house.refurbisher, { results });
  const { letter } = (await proposeGrade(house.grader, tag))!;
  await signGrade(house.grader, tag, { letter });
  return { tag, row: await publish(house.grader, tag) };
}

describe('a published report', () => {
  test('is frozen canonical JSON with its hash, at an address that can’t be guessed', async () => {
    const { row } = await published(dark);
    const report = (await readReport(row.slug))!;
    expect(row.slug).toMatch(/^[0-9a-z]{14}$/);
    expect(report.sha256).toBe(sha256Of(new TextEncoder().encode(report.json)));
    // RFC 8785: writing what was read gives the same bytes.
    expect(canonicalize(JSON.parse(report.json))).toBe(report.json);
    expect(report.content).toMatchObject({
      format: 'mendlight-report',
      version: 1,
      headline: 'Takes good pictures once its exposure is set right',
      grade: { letter: 'B', overridden: false, signedByBenchWorker: false },
      frame: { fullCircle: expect.any(Number) },
      capture: { shots: 2, targetShots: 2, settings: '1/60 s, f/2.8, ISO 80, 6.2 mm' },
    });
    expect(report.content.rules.length).toBeGreaterThanOrEqual(12);
    expect(report.content.curves.map((curve) => curve.label)).toEqual(['middle', 'weakest corner']);
    expect(report.content.curves[0]?.response).toEqual([1, 0.6, 0.2]);
    expect(report.content.originals).toHaveLength(2);
    expect(report.withdrawn).toBeNull();
  });

  test('holds no serial, staff name, cost, e-mail or place, even when someone typed them into the log', async () => {
    const { tag } = await tested(house.refurbisher);
    const { serial } = await getUnit(house.owner, tag);
    await addLogEntry(house.refurbisher, tag, {
      kind: 'action',
      text: `${house.refurbisher.name} cleaned ${serial}; ask ${house.owner.email}.`,
      costMinor: 987_654,
    });
    await changeState(house.refurbisher, tag, { to: 'awaiting-grade' });
    await signGrade(house.grader, tag, {
      letter: 'B',
      reason: `I, ${house.grader.name}, dropped it.`,
    });
    const { json, content } = (await readReport((await publish(house.grader, tag)).slug))!;
    expect(content.unit.serialEnding).toBe(serial.slice(-4));
    for (const secret of [
      serial,
      '987654',
      '2500',
      house.owner.email,
      house.owner.name,
      house.refurbisher.name,
      house.grader.name,
      'IMG_0',
      'GPS',
    ]) {
      expect(json).not.toContain(secret);
    }
    expect(content.repair.work).toEqual([
      `a member of the shop cleaned …${serial.slice(-4)}; ask a member of the shop.`,
    ]);
  });

  test('has pictures of its own without metadata', async () => {
    const { row } = await published();
    const { content } = (await readReport(row.slug))!;
    expect(content.pictures.map((picture) => picture.name)).toEqual([
      'view',
      'middle',
      'weakest-corner',
    ]);
    expect(content.pictures[2]?.label).toBe('Weakest corner, lower right');
    for (const { name, width } of content.pictures) {
      const response = await reportPicture(row.slug, name, new Request('http://localhost/'));
      const bytes = new Uint8Array(await response.arrayBuffer());
      const found = await sharp(bytes).metadata();
      expect(found.width).toBe(width);
      expect([found.exif, found.icc, found.xmp, found.iptc]).toEqual([
        undefined,
        undefined,
        undefined,
        undefined,
      ]);
      const etag = response.headers.get('etag')!;
      const again = new Request('http://localhost/', { headers: { 'if-none-match': etag } });
      expect((await reportPicture(row.slug, name, again)).status).toBe(304);
    }
    const missing = reportPicture(row.slug, 'thumb', new Request('http://localhost/'));
    await expect(missing).rejects.toMatchObject({ code: 'notFound' });
  });

  test('does not change when the unit does', async () => {
    const { tag, row } = await published();
    const before = (await readReport(row.slug))!.json;
    await changeState(house.refurbisher, tag, { to: 'on-the-bench' });
    await addLogEntry(house.refurbisher, tag, { kind: 'action', text: 'New shutter.' });
    expect((await readReport(row.slug))!.json).toBe(before);
  });

  test('can be withdrawn with a reason, and published again as the next version', async () => {
    const { tag, row } = await published();
    await withdraw(house.grader, row.slug, { reason: 'The wrong unit was photographed.' });
    expect((await readReport(row.slug))?.withdrawn).toMatchObject({
      reason: 'The wrong unit was photographed.',
    });
    await expect(withdraw(house.grader, row.slug, { reason: 'Again.' })).rejects.toMatchObject({
      code: 'conflict',
    });
    expect((await getUnit(house.grader, tag)).state).toBe('graded');
    const again = await publish(house.grader, tag);
    expect(again).toMatchObject({ slug: row.slug, version: 2, withdrawnAt: null });
    const report = (await readReport(row.slug))!;
    expect(report.withdrawn).toBeNull();
    expect(report.versions.map(({ version }) => version)).toEqual([1, 2]);
    expect((await listReports(house.owner)).find((one) => one.slug === row.slug)?.version).toBe(2);
  });

  test('needs a signed grade', async () => {
    const { tag } = await sent(house.refurbisher);
    await expect(publish(house.grader, tag)).rejects.toMatchObject({ code: 'conflict' });
  });

  test('is not another shop’s to withdraw or list, and an unknown address has none', async () => {
    const { row } = await published();
    const other = await makeHouse();
    await expect(withdraw(other.grader, row.slug, { reason: 'Not mine.' })).rejects.toMatchObject({
      code: 'notFound',
    });
    expect(await listReports(other.owner)).toEqual([]);
    expect(await readReport('00000000000000')).toBeNull();
  });
});

describe('the audit chain', () => {
  test('holds across everything done here, and shows where a row was altered, removed or put in', async () => {
    const { owner } = await makeHouse();
    for (let i = 0; i < 3; i++) await takenIn(owner);
    const { AuditEvent } = db();
    expect(await AuditEvent.count({ where: { shopId: owner.shopId } })).toBe(3);
    expect(await firstBreak(owner.shopId)).toBeNull();
    expect(await firstBreak(house.shop.id)).toBeNull();
    const second = { where: { shopId: owner.shopId, position: 2 } };
    const row = await AuditEvent.findOne({ ...second, rejectOnEmpty: true });
    await AuditEvent.update({ detail: { tag: 'ML-9999' } }, second);
    expect(await firstBreak(owner.shopId)).toBe(2);
    await AuditEvent.update({ detail: row.detail }, second);
    expect(await firstBreak(owner.shopId)).toBeNull();
    await AuditEvent.destroy(second);
    expect(await firstBreak(owner.shopId)).toBe(2);
  });
});
