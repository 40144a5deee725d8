import { route } from '@/lib/server/route';
import { createRun } from '@/lib/server/runs';
import { runInputSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'run.create', input: runInputSchema, status: 201 },
  ({ actor, params, input }) => createRun(actor, params.tag, input),
);
