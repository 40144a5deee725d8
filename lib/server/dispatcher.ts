import 'server-only';
import { env } from './env';
import { type Dispatcher, runLanes } from './lanes';
import { mailHandler } from './mail';
import { shotHandler } from './worker/shot-job';

/** Works on the queue in this process: analyses as many at a time as WORKERS says, mails one by one. */
export function startDispatcher(): Dispatcher {
  return runLanes([
    { kind: 'analyse-shot', handler: shotHandler, width: env().WORKERS },
    { kind: 'send-mail', handler: mailHandler, width: 1 },
  ]);
}
