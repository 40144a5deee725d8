import 'server-only';
import { startDispatcher } from '../dispatcher';

/** Works on the queue in the web server's process, and gives back what is in hand when that ends. */
export function workUntilTheEnd(): void {
  const dispatcher = startDispatcher();
  const end = () => dispatcher.stop().then(() => process.exit(0));
  // NEXT_MANUAL_SIG_HANDLE leaves these two to us: Next would end the process before the jobs are given back.
  process.once('SIGTERM', end);
  process.once('SIGINT', end);
  // The start command keeps a channel open; when it closes, that command is gone, and so are database and store.
  process.once('disconnect', end);
}
