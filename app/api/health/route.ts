import { health } from '@/lib/server/health';
import { route } from '@/lib/server/route';

export const GET = route({ access: 'public' }, health);
