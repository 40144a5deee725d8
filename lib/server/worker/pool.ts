import 'server-only';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { Piscina } from 'piscina';
import { env } from '../env';
import type { Answer, Task } from './analyse-shot';

const kept = globalThis as unknown as { mendlightPool?: Piscina<Task, Answer> };

/** The build bundles the thread's code; everywhere else tsx reads it as it stands. */
function threads(): Piscina<Task, Answer> {
  const built = env().NODE_ENV === 'production';
  const file = built ? 'dist/worker/analyse-shot.mjs' : 'lib/server/worker/analyse-shot.ts';
  kept.mendlightPool ??= new Piscina<Task, Answer>({
    filename: pathToFileURL(join(process.cwd(), file)).href,
    execArgv: built ? [] : ['--import', 'tsx'],
    minThreads: 0,
    maxThreads: Math.max(1, env().WORKERS),
    idleTimeout: 60_000,
  });
  return kept.mendlightPool;
}

export async function analyseInThread(task: Task, signal: AbortSignal): Promise<Answer> {
  return threads().run(task, { transferList: [task.bytes.buffer], signal });
}

export async function closeThreads(): Promise<void> {
  await kept.mendlightPool?.destroy();
  delete kept.mendlightPool;
}
