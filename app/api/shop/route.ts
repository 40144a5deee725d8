import { route } from '@/lib/server/route';
import { updateShop } from '@/lib/server/shop';
import { shopSettingsSchema } from '@/lib/shared/schemas';

export const PATCH = route({ access: 'shop.edit', input: shopSettingsSchema }, ({ actor, input }) =>
  updateShop(actor, input),
);
