/** Runs once when the server starts: the queue is worked on in the server's own process. */
export async function register(): Promise<void> {
  // Next compiles this file for the edge too, where this is a constant: without it the database would be bundled there.
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    const { workUntilTheEnd } = await import('./lib/server/worker/in-server');
    workUntilTheEnd();
  }
}
