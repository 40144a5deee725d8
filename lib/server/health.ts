import 'server-only';
import { QueryTypes } from 'sequelize';
import { db } from './db';

/** For a load balancer: the process answers and reaches its database. */
export async function health(): Promise<{ status: 'ok' }> {
  await db().sequelize.query('SELECT 1', { type: QueryTypes.SELECT });
  return { status: 'ok' };
}
