import { join } from 'node:path';
import { startMail } from '@/fixtures/fakes/mail';
import { startStore } from '@/fixtures/fakes/store';
import { demoPassword, demoPeople } from '@/lib/shared/demo';
import { endLeftOver } from './lib/mariadb.mjs';

// The fakes of store and mail in a process of their own: it tells its parent the addresses, and ends with it.
const folder = process.argv[2];
if (!folder || !process.send) throw new Error('Started by scripts/start.mjs with a folder.');
const store = await startStore(join(folder, 'store'));
const mail = await startMail(join(folder, 'mail'));
process.send({ store: store.url, mail: mail.url, demoPassword, demoPeople });

process.once('SIGTERM', () => process.exit(0));
// The start command was killed: its database must not outlive it.
process.once('disconnect', () => endLeftOver(join(folder, 'database')).then(() => process.exit(0)));
