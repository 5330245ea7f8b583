import { Worker } from 'node:worker_threads';

/** An analysis thread for plain Node processes under tsx; the web process makes its own, from the bundle. */
export function newAnalysisThread(memoryMb = 1024): Worker {
  return new Worker(new URL('./thread.mjs', import.meta.url), {
    resourceLimits: { maxOldGenerationSizeMb: memoryMb },
  });
}
