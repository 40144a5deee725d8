import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import type { QueryInterface, Sequelize } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';

const folder = fileURLToPath(new URL('../../migrations/', import.meta.url));

interface Steps {
  up(step: { context: QueryInterface }): Promise<void>;
  down(step: { context: QueryInterface }): Promise<void>;
}

/** The migrations of `migrations/`, in order, remembered in the table `schema_migrations`. */
export function migrator(sequelize: Sequelize): Umzug<QueryInterface> {
  const names = readdirSync(folder)
    .filter((name) => /^\d{4}-.*\.ts$/.test(name))
    .sort();
  return new Umzug({
    migrations: names.map((file) => {
      const load = (): Promise<Steps> => import(pathToFileURL(join(folder, file)).href);
      return {
        name: file.replace(/\.ts$/, ''),
        up: async ({ context }) => (await load()).up({ context }),
        down: async ({ context }) => (await load()).down({ context }),
      };
    }),
    context: sequelize.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize, tableName: 'schema_migrations' }),
    logger: undefined,
  });
}
