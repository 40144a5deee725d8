import { saveChecks } from '@/lib/server/checks';
import { route } from '@/lib/server/route';
import { checksSchema } from '@/lib/shared/schemas';

export const PUT = route(
  { access: 'check.save', input: checksSchema },
  ({ actor, params, input }) => saveChecks(actor, params.tag, input),
);
