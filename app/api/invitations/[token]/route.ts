import { acceptInvitation } from '@/lib/server/invitations';
import { route } from '@/lib/server/route';
import { acceptInvitationSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'public', input: acceptInvitationSchema, status: 201 },
  ({ params, input }) => acceptInvitation(params.token, input),
);
