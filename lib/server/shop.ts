import 'server-only';
import type { z } from 'zod';
import type { Actor } from '@/lib/shared/api';
import type { shopSettingsSchema } from '@/lib/shared/schemas';
import { demand } from './access';
import { change, record } from './audit';
import { db } from './db';

export interface ShopSettings {
  name: string;
  currency: string;
  signOwnWork: boolean;
}

export async function shopSettings(actor: Actor): Promise<ShopSettings> {
  const shop = await db().Shop.findByPk(actor.shopId, { rejectOnEmpty: true });
  return { name: shop.name, currency: shop.currency, signOwnWork: shop.signOwnWork };
}

export async function updateShop(
  actor: Actor,
  patch: z.output<typeof shopSettingsSchema>,
): Promise<ShopSettings> {
  demand(actor, 'shop.edit');
  await change(actor, async (transaction) => {
    await db().Shop.update(patch, { where: { id: actor.shopId }, transaction });
    await record(transaction, actor, 'shop.edit', ['Shop', actor.shopId], patch);
  });
  return shopSettings(actor);
}
