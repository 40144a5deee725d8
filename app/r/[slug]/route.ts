import { route } from '@/lib/server/route';
import { reportDocument } from './document';

export const GET = route({ access: 'public' }, ({ params, request }) =>
  reportDocument(params.slug, request),
);
