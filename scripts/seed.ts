import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { benchWork, type Cast, measured, outcome, photographs } from '@/fixtures/demo/bring-about';
import { openShop } from '@/fixtures/demo/open-shop';
import { demoUnits } from '@/fixtures/demo/scenario';
import { db } from '@/lib/server/db';

// Brings the demo shop into being on an empty database, and goes on with it where an earlier start was broken off.
const folder = process.argv[2];
if (!folder) throw new Error('Say where to note that the demo shop is complete.');
process.once('disconnect', () => process.exit(1));
process.once('SIGTERM', () => process.exit(1));

const begun = performance.now();
const say = (text: string) =>
  console.log(`${((performance.now() - begun) / 1000).toFixed(1)} s  ${text}`);

const cast = await openShop();
process.send?.('people can sign in');
if (cast) {
  for (const story of demoUnits) await benchWork(cast, story);
  say('bench work done');
  await throughTheTest(cast);
  say('complete');
}
writeFileSync(join(folder, 'seeded'), new Date().toISOString());
await db().sequelize.close();
process.exit(0);

/** Photographs one unit after the other, and signs each as soon as the server has measured it. */
async function throughTheTest(cast: Cast): Promise<void> {
  const waiting: typeof demoUnits = [];
  const settle = async () => {
    for (const story of [...waiting]) {
      if (!(await measured(cast, story))) continue;
      waiting.splice(waiting.indexOf(story), 1);
      await outcome(cast, story);
      say(`${story.intake.serial}: ${story.state}`);
    }
  };
  for (const story of demoUnits) {
    await photographs(cast, story);
    waiting.push(story);
    await settle();
  }
  while (waiting.length > 0) {
    await settle();
    await new Promise((resolve) => setTimeout(resolve, 300));
  }
}
