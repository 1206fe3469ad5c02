import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import { Broken, Trouble, UserMistake } from '../mistakes.js';
import { packageRoot } from '../provenance/package-root.js';
import type { ReaderAnswer, ReaderRequest } from './reader-messages.js';
import { METHODS } from './reader-messages.js';
import type { AsyncQuestions } from './reading.js';

/** Answers questions about a store in a thread of its own, one after the other, on a read-only connection.
 *  Nothing is opened before the first question. Trouble in an answer rejects that question only.
 *  Always the built thread program, so that it also works from sources under a test runner. */
export function startReader(path: string): AsyncQuestions {
  let thread: ReaderThread | undefined;
  let closed = false;
  const ask = (method: ReaderRequest['method'], args: readonly unknown[]) => {
    if (closed) return Promise.reject(new Broken('reader-closed', `${path}: the reader was closed`));
    if (thread === undefined || thread.ended) thread = new ReaderThread(path);
    return thread.ask(method, args);
  };
  const close = async () => {
    closed = true;
    await thread?.close();
  };
  const methods = METHODS.map((method) => [method, (...args: unknown[]) => ask(method, args)]);
  return { ...Object.fromEntries(methods), close } as AsyncQuestions;
}

interface Waiting {
  resolve(value: unknown): void;
  reject(error: Error): void;
}

class ReaderThread {
  ended = false;
  private readonly worker: Worker;
  private readonly waiting = new Map<number, Waiting>();
  private last = 0;

  constructor(path: string) {
    const program = join(packageRoot(), 'dist', 'orchestrator', 'store', 'reader-program.js');
    this.worker = new Worker(program, { workerData: path });
    this.worker.unref();
    this.worker.on('message', (answer: ReaderAnswer) => this.settle(answer));
    this.worker.on('error', (error) => this.end(error));
    this.worker.on('exit', () => this.end(new Error('the thread ended')));
  }

  ask(method: ReaderRequest['method'], args: readonly unknown[]): Promise<unknown> {
    const id = ++this.last;
    return new Promise((resolve, reject) => {
      this.waiting.set(id, { resolve, reject });
      // While somebody waits for an answer the process must not end.
      this.worker.ref();
      this.worker.postMessage({ id, method, args } satisfies ReaderRequest);
    });
  }

  /** Lets the questions already asked be answered, then closes the connection. */
  async close(): Promise<void> {
    if (this.ended) return;
    const over = new Promise<void>((resolve) => this.worker.once('exit', () => resolve()));
    // Whoever waits for the end must see it, even if nothing else keeps the process alive.
    this.worker.ref();
    this.worker.postMessage(null);
    await over;
  }

  private settle(answer: ReaderAnswer): void {
    const asked = this.waiting.get(answer.id);
    this.waiting.delete(answer.id);
    if (this.waiting.size === 0) this.worker.unref();
    if ('trouble' in answer) asked?.reject(revive(answer.trouble));
    else asked?.resolve(answer.value);
  }

  private end(cause: Error): void {
    this.ended = true;
    const error = new Broken('reader-died', `the thread that reads the store ended: ${cause.message}`, {
      cause,
    });
    for (const asked of this.waiting.values()) asked.reject(error);
    this.waiting.clear();
  }
}

/** Errors lose their class on the way out of a thread. */
function revive({ code, exit, message }: Extract<ReaderAnswer, { trouble: unknown }>['trouble']): Error {
  const error = new Trouble(code, exit, message);
  const kinds: Record<string, object> = { 'user-mistake': UserMistake.prototype };
  return Object.setPrototypeOf(error, kinds[code] ?? (exit === 3 ? Broken : Trouble).prototype) as Error;
}
