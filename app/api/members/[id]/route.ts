import { changeMember } from '@/lib/server/members';
import { route } from '@/lib/server/route';
import { changeMemberSchema } from '@/lib/shared/schemas';

export const PATCH = route(
  { access: 'member.manage', input: changeMemberSchema },
  ({ actor, params, input }) => changeMember(actor, params.id, input),
);
