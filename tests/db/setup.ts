import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { startMail } from '@/fixtures/fakes/mail';
import { startStore, storeAccess } from '@/fixtures/fakes/store';
import { connect } from '@/models/db';
import { startThrowawayMariadb } from '@/scripts/lib/mariadb.mjs';
import { migrator } from '@/scripts/lib/migrate';

declare module 'vitest' {
  interface ProvidedContext {
    /** The environment that `lib/server/env.ts` reads. */
    environment: Record<string, string>;
    databaseUrl: string;
    /** Where the mail fake keeps what it got (`keptMails` of fixtures/fakes/mail). */
    mailFolder: string;
  }
}

/** A real MariaDB in a temporary folder, migrated, and the fakes of store and mail, for all database tests. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const folder = mkdtempSync(join(tmpdir(), 'mendlight-fakes-'));
  const mailFolder = join(folder, 'mail');
  const [database, store, mail] = await Promise.all([
    startThrowawayMariadb(),
    startStore(join(folder, 'store')),
    startMail(mailFolder),
  ]);
  const { sequelize } = connect(database.url);
  await migrator(sequelize).up();
  await sequelize.close();

  project.provide('databaseUrl', database.url);
  project.provide('mailFolder', mailFolder);
  project.provide('environment', {
    DATABASE_URL: database.url,
    AUTH_SECRET: 'a secret for tests only, of more than 32 characters',
    S3_ENDPOINT: store.url,
    S3_BUCKET: storeAccess.bucket,
    S3_KEY: storeAccess.key,
    S3_SECRET: storeAccess.secret,
    SMTP_URL: mail.url,
  });
  return async () => {
    await Promise.all([database.stop(), store.stop(), mail.stop()]);
    rmSync(folder, { recursive: true, force: true });
  };
}
