import { reportPicture } from '@/lib/server/reports';
import { route } from '@/lib/server/route';

export const GET = route({ access: 'public' }, ({ params, request }) =>
  reportPicture(params.slug, params.name, request),
);
