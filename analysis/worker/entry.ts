import { parentPort } from 'node:worker_threads';
import { handle } from './handle';
import type { WorkerRequest } from './messages';

// One question after the other; a thrown error is answered too, so that whoever waits is told.
parentPort?.on('message', ({ id, request }: { id: number; request: WorkerRequest }) => {
  try {
    parentPort?.postMessage({ id, answer: handle(request) });
  } catch (error) {
    parentPort?.postMessage({ id, error: (error as Error).message });
  }
});
