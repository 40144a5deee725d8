import { route } from '@/lib/server/route';
import { reanalyse } from '@/lib/server/shots';
import { reanalyseSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'shot.analyse', input: reanalyseSchema, status: 202 },
  ({ actor, params, input }) => reanalyse(actor, params.id, input),
);
