import { parentPort, workerData } from 'node:worker_threads';
import { endpoints } from '@/lib/contracts/endpoints';
import { checkBodyBytes } from './checkJson.ts';

// One large body per thread: it ends, or is ended, with its memory. The endpoint's own schema does the check.
const { endpointName, bytes } = workerData as { endpointName: string; bytes: Uint8Array };
const endpoint = endpoints.find((candidate) => candidate.name === endpointName);
if (!endpoint) throw new Error(`lib/contracts/endpoints.ts does not list ${endpointName}`);
parentPort?.postMessage(checkBodyBytes(endpoint, bytes));
