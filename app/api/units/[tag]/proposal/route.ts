import { proposeGrade } from '@/lib/server/grades';
import { route } from '@/lib/server/route';

export const GET = route({ access: 'grade.read' }, ({ actor, params }) =>
  proposeGrade(actor, params.tag),
);
