import { forgotPassword } from '@/lib/server/password-reset';
import { route } from '@/lib/server/route';
import { forgottenSchema } from '@/lib/shared/schemas';

export const POST = route({ access: 'public', input: forgottenSchema }, ({ input }) =>
  forgotPassword(input),
);
