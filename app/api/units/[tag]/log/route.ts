import { addLogEntry } from '@/lib/server/log';
import { route } from '@/lib/server/route';
import { logEntrySchema } from '@/lib/shared/schemas';

export const POST = route(
  { access: 'log.add', input: logEntrySchema, status: 201 },
  ({ actor, params, input }) => addLogEntry(actor, params.tag, input),
);
