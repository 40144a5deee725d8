import { withdraw } from '@/lib/server/reports';
import { route } from '@/lib/server/route';
import { withdrawSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'report.withdraw', input: withdrawSchema },
  ({ actor, params, input }) => withdraw(actor, params.slug, input),
);
