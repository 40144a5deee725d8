import { startDispatcher } from '@/lib/server/dispatcher';

// Takes analyses from the queue on any machine that reaches the database and the store; the web server may then run with WORKERS=0.
const dispatcher = startDispatcher();
console.log('Working on the queue. Ctrl-C ends it and gives back what is in hand.');
for (const signal of ['SIGTERM', 'SIGINT'] as const) {
  process.once(signal, () => dispatcher.stop().then(() => process.exit(0)));
}
