// A worker thread's way into TypeScript: outside a bundle, Node 20 does not hand the loader on to threads.
import { register } from 'tsx/esm/api';

register();
await import('../../analysis/worker/entry.ts');
