import { invite } from '@/lib/server/invitations';
import { route } from '@/lib/server/route';
import { inviteSchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'member.manage', input: inviteSchema, status: 201 },
  ({ actor, input }) => invite(actor, input),
);
