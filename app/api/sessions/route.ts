import { route } from '@/lib/server/route';
import { listSessions } from '@/lib/server/sessions';

export const GET = route({ access: 'signed-in' }, ({ actor }) => listSessions(actor));
