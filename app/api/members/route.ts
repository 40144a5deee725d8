import { listPeople } from '@/lib/server/members';
import { route } from '@/lib/server/route';

export const GET = route({ access: 'member.read' }, ({ actor }) => listPeople(actor));
