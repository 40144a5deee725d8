import 'server-only';
import { connect, type Db } from '@/models/db';
import { env } from './env';

const kept = globalThis as unknown as { mendlightDb?: Db };

/** The process's one pool; it survives hot reloads. */
export function db(): Db {
  kept.mendlightDb ??= connect(env().DATABASE_URL);
  return kept.mendlightDb;
}
