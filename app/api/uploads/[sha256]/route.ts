import { route } from '@/lib/server/route';
import { knowsOriginal, receiveOriginal } from '@/lib/server/uploads';

export const HEAD = route({ access: 'shot.add' }, ({ actor, params }) =>
  knowsOriginal(actor, params.sha256),
);

export const PUT = route({ access: 'shot.add', status: 201 }, ({ actor, params, request }) =>
  receiveOriginal(actor, params.sha256, request),
);
