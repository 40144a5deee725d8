import { resetPassword } from '@/lib/server/password-reset';
import { route } from '@/lib/server/route';
import { newPasswordSchema } from '@/lib/shared/schemas';

export const POST = route({ access: 'public', input: newPasswordSchema }, ({ params, input }) =>
  resetPassword(params.token, input),
);
