/** Runs once when the server starts: the queue is worked on in the server's own process. */
export async function register(): Promise<void> {
  const { startDispatcher } = await import('./lib/server/dispatcher');
  const dispatcher = startDispatcher();
  const end = () => dispatcher.stop().then(() => process.exit(0));
  // NEXT_MANUAL_SIG_HANDLE: without it Next would end the process before the jobs in hand are given back.
  process.once('SIGTERM', end);
  process.once('SIGINT', end);
  // The start command keeps a channel open; when it closes, that command is gone, and so are database and store.
  process.once('disconnect', end);
}
