import { parentPort, workerData } from 'node:worker_threads';
import { Trouble } from '../mistakes.js';
import { openForReading } from './open.js';
import { questionsOf } from './questions.js';
import type { ReaderAnswer, ReaderRequest } from './reader-messages.js';
import type { Questions, Reading } from './reading.js';

/** The program of the reader thread: opens the store at the first question, ends at the message null. */
const path = workerData as string;
let reading: (Reading & Questions) | undefined;

parentPort?.on('message', (request: ReaderRequest | null) => {
  if (request === null) {
    reading?.close();
    parentPort?.close();
  } else {
    parentPort?.postMessage(answer(request));
  }
});

function answer({ id, method, args }: ReaderRequest): ReaderAnswer {
  try {
    reading ??= open();
    const ask = reading as unknown as Record<string, (...args: readonly unknown[]) => unknown>;
    return { id, value: ask[method](...args) };
  } catch (error) {
    return { id, trouble: describe(error) };
  }
}

function open(): Reading & Questions {
  const opened = openForReading(path);
  return { ...opened, ...questionsOf(opened) };
}

function describe(error: unknown): { code: string; exit: 1 | 2 | 3; message: string } {
  if (error instanceof Trouble) return { code: error.code, exit: error.exit, message: error.message };
  return { code: 'reader-error', exit: 3, message: error instanceof Error ? error.message : String(error) };
}
