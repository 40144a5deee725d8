import { signGrade } from '@/lib/server/grades';
import { route } from '@/lib/server/route';
import { signGradeSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'grade.sign', input: signGradeSchema, status: 201 },
  ({ actor, params, input }) => signGrade(actor, params.tag, input),
);
