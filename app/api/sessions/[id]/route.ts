import { route } from '@/lib/server/route';
import { endSession } from '@/lib/server/sessions';

export const DELETE = route({ access: 'signed-in' }, ({ actor, params }) =>
  endSession(actor, params.id),
);
