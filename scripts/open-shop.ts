import { randomBytes } from 'node:crypto';
import { parseArgs } from 'node:util';
import { z } from 'zod';
import { change, record } from '@/lib/server/audit';
import { db } from '@/lib/server/db';
import { forgotPassword } from '@/lib/server/password-reset';
import { hashPassword } from '@/lib/server/passwords';
import { emailSchema } from '@/lib/shared/schemas';

// Opens a shop on an own database and mails its owner the link to choose a password; members are invited from the settings then.
const { values } = parseArgs({
  options: {
    shop: { type: 'string' },
    currency: { type: 'string', default: 'EUR' },
    name: { type: 'string' },
    email: { type: 'string' },
  },
});
const parsed = z
  .object({
    shop: z.string().trim().min(1).max(80),
    currency: z
      .string()
      .regex(/^[A-Z]{3}$/, 'Give the currency by its ISO 4217 letters, such as EUR.'),
    name: z.string().trim().min(1).max(80),
    email: emailSchema,
  })
  .safeParse(values);
if (!parsed.success) {
  console.error(z.prettifyError(parsed.error));
  console.error(
    'npm run open-shop -- --shop "Quay Repair" --currency EUR --name "Full Name" --email owner@example.org',
  );
  process.exit(2);
}
const { shop: shopName, currency, name, email } = parsed.data;
const { Shop, User, Membership, sequelize } = db();

const shop = await Shop.create({ name: shopName, currency });
await change({ shopId: shop.id }, async (transaction) => {
  const [user] = await User.findOrCreate({
    where: { email },
    defaults: { email, name, passwordHash: await hashPassword(randomBytes(24).toString('base64')) },
    transaction,
  });
  const member = { shopId: shop.id, userId: user.id };
  await Membership.create({ ...member, role: 'owner' }, { transaction });
  await record(transaction, member, 'shop.open', ['Shop', shop.id], { currency });
});
await forgotPassword({ email });
console.log(`${shopName} is open. ${email} gets a mail with the link to choose a password.`);
await sequelize.close();
process.exit(0);
