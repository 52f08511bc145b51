// Entry of a worker thread when the server runs from its TypeScript sources: teaches the thread to read them first.
import { workerData } from 'node:worker_threads';
import { register } from 'tsx/esm/api';

register();
await import(workerData.file);
