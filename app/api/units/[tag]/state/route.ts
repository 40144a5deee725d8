import { route } from '@/lib/server/route';
import { changeState } from '@/lib/server/units';
import { stateChangeSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'unit.move', input: stateChangeSchema },
  ({ actor, params, input }) => changeState(actor, params.tag, input),
);
