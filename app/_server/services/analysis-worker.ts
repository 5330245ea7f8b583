import 'server-only';
import { Worker } from 'node:worker_threads';
import { AnalysisWorker } from '@/db/worker/analysis-worker';

declare global {
  var motebookAnalysisWorker: AnalysisWorker | undefined;
}

/** The web process's worker thread for intake, kept across development reloads. */
export function analysisWorker(): AnalysisWorker {
  globalThis.motebookAnalysisWorker ??= new AnalysisWorker({
    create: () =>
      new Worker(new URL('../../../analysis/worker/entry.ts', import.meta.url), {
        resourceLimits: { maxOldGenerationSizeMb: 512 },
      }),
  });
  return globalThis.motebookAnalysisWorker;
}
