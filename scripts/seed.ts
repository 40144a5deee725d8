import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { benchWork, type Cast, measured, outcome, photographs } from '@/fixtures/demo/bring-about';
import { demoShop, demoUnits } from '@/fixtures/demo/scenario';
import { db } from '@/lib/server/db';
import { hashPassword } from '@/lib/server/passwords';
import type { Actor } from '@/lib/shared/api';
import { demoPassword, demoPeople } from '@/lib/shared/demo';
import type { Role } from '@/lib/shared/words';

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
process.disconnect?.();

/** The shop and its people; null when the database belongs to someone else. */
async function openShop(): Promise<Cast | null> {
  const { Shop, User, Membership } = db();
  const known = await Shop.findOne({ where: { name: demoShop.name } });
  if (!known && (await Shop.count()) > 0) return null;
  const passwordHash = await hashPassword(demoPassword);
  return db().sequelize.transaction(async (transaction) => {
    const shop = known ?? (await Shop.create(demoShop, { transaction }));
    const actors = new Map<Role, Actor>();
    for (const { email, name, role } of demoPeople) {
      const [user] = await User.findOrCreate({
        where: { email },
        defaults: { email, name, passwordHash },
        transaction,
      });
      await Membership.findOrCreate({
        where: { shopId: shop.id, userId: user.id },
        defaults: { shopId: shop.id, userId: user.id, role },
        transaction,
      });
      const { id: shopId, name: shopName, currency } = shop;
      actors.set(role, {
        userId: user.id,
        sessionId: '',
        shopId,
        shopName,
        currency,
        role,
        name,
        email,
      });
    }
    const actor = (role: Role) => {
      const found = actors.get(role);
      if (!found) throw new Error(`The demo shop has no ${role}.`);
      return found;
    };
    return { owner: actor('owner'), refurbisher: actor('refurbisher'), grader: actor('grader') };
  });
}

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
