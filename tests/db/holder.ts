import { runLanes } from '@/lib/server/lanes';

/** A process that claims a job and works on it for ever; `queue.test.ts` kills it. */
runLanes(
  [
    {
      kind: 'analyse-shot',
      width: 1,
      handler: {
        work() {
          process.stdout.write('claimed\n');
          return new Promise(() => {});
        },
        async failed() {},
      },
    },
  ],
  { leaseMs: Number(process.argv[2]), lookMs: 50 },
);
