import { register } from 'tsx/esm/api';

// A worker thread started from source: it has to be taught TypeScript by itself before it can become one.
register();
await import('./computing-worker.ts');
