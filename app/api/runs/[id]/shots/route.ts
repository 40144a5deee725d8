import { route } from '@/lib/server/route';
import { addShot } from '@/lib/server/shots';
import { shotInputSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'shot.add', input: shotInputSchema, status: 201 },
  ({ actor, params, input }) => addShot(actor, params.id, input),
);
