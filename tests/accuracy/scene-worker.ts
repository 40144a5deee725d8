import { runScene, type SceneTask } from './run-scene.ts';

// A child process of scripts/accuracy.ts: one scene at a time, so that both cores are busy.
process.on('message', async (task: SceneTask) => {
  try {
    process.send?.({ result: await runScene(task) });
  } catch (error) {
    process.send?.({ task, error: error instanceof Error ? error.stack : String(error) });
  }
});
