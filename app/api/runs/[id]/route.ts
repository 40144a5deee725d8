import { route } from '@/lib/server/route';
import { getRun } from '@/lib/server/runs';

export const GET = route({ access: 'run.read' }, ({ actor, params }) => getRun(actor, params.id));
