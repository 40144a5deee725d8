import { publish } from '@/lib/server/reports';
import { route } from '@/lib/server/route';

export const POST = route({ access: 'report.publish', status: 201 }, ({ actor, params }) =>
  publish(actor, params.tag),
);
