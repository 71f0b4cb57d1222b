import { parentPort, workerData } from 'node:worker_threads';
import { answerQuestion, type FitQuestion } from './askFit.ts';

// One question a thread: its memory goes with it.
parentPort?.postMessage(answerQuestion(workerData as FitQuestion));
