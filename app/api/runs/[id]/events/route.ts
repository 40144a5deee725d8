import { route } from '@/lib/server/route';
import { runEvents } from '@/lib/server/run-events';

export const GET = route({ access: 'run.read' }, ({ actor, params, request }) =>
  runEvents(actor, params.id, request.signal),
);
