import { route } from '@/lib/server/route';
import { getShot } from '@/lib/server/shots';

export const GET = route({ access: 'run.read' }, ({ actor, params }) => getShot(actor, params.id));
