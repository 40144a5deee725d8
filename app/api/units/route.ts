import { route } from '@/lib/server/route';
import { createUnit, listUnits } from '@/lib/server/units';
import { unitInputSchema, unitQuerySchema } from '@/lib/shared/schemas';

export const GET = route({ access: 'unit.read', query: unitQuerySchema }, ({ actor, query }) =>
  listUnits(actor, query),
);

export const POST = route(
  { access: 'unit.create', input: unitInputSchema, status: 201 },
  ({ actor, input }) => createUnit(actor, input),
);
