import { route } from '@/lib/server/route';
import { getUnit, updateUnit } from '@/lib/server/units';
import { unitPatchSchema } from '@/lib/shared/schemas';

export const GET = route({ access: 'unit.read' }, ({ actor, params }) =>
  getUnit(actor, params.tag),
);

export const PATCH = route(
  { access: 'unit.edit', input: unitPatchSchema },
  ({ actor, params, input }) => updateUnit(actor, params.tag, input),
);
