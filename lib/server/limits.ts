import 'server-only';
import { Op } from 'sequelize';
import { UserError } from '@/lib/shared/errors';
import { db } from './db';

const minute = 60_000;

/**
 * Counts tries at something in the database, so that every web process counts alike, and refuses when there were
 * `most` within `minutes`. Returns a function that forgets this try, for one that turned out well.
 */
export async function limit(
  bucket: string,
  most: number,
  minutes: number,
): Promise<() => Promise<void>> {
  const { Attempt } = db();
  const since = new Date(Date.now() - minutes * minute);
  await Attempt.destroy({ where: { bucket, at: { [Op.lt]: since } } });
  const attempt = await Attempt.create({ bucket });
  const tries = await Attempt.count({ where: { bucket } });
  if (tries > most) {
    await attempt.destroy();
    throw new UserError('tooMany', `Too many attempts. Wait ${minutes} minutes and try again.`);
  }
  return () => attempt.destroy();
}
