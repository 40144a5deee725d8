import { route } from '@/lib/server/route';
import { shotPicture } from '@/lib/server/shots';

export const GET = route({ access: 'run.read' }, ({ actor, params, request }) =>
  shotPicture(actor, params.id, params.name, request),
);
