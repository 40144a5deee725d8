import { gradingQueue } from '@/lib/server/grades';
import { route } from '@/lib/server/route';

export const GET = route({ access: 'grade.queue' }, ({ actor }) => gradingQueue(actor));
