import { wholeNumber } from '../commands/assignments.js';
import { mustExist } from '../commands/read-store.js';
import { Broken } from '../mistakes.js';
import { startReader } from '../store/reader-thread.js';
import { PORT } from './options.js';
import type { PlaceOptions } from './options.js';
import { remark } from './session.js';
import type { Session } from './session.js';

export interface OpenDashboard {
  /** e.g. http://127.0.0.1:4671 */
  readonly address: string;
  close(): Promise<void>;
}

/** Opens the dashboard on a store: on the port asked for, else on our usual one, else on any free one.
 *  @throws Broken where the port asked for is taken */
export async function openDashboard(
  store: string,
  options: PlaceOptions,
  session: Session,
): Promise<OpenDashboard> {
  mustExist(store);
  const questions = startReader(store);
  const listen = (port: number) => session.serveDashboard({ questions, store }, { port, host: options.bind });
  try {
    const dashboard = await onSomePort(options, session, listen);
    return {
      address: dashboard.address,
      async close() {
        await dashboard.close();
        await questions.close();
      },
    };
  } catch (error) {
    await questions.close();
    throw error;
  }
}

async function onSomePort<T>(
  options: PlaceOptions,
  session: Session,
  listen: (port: number) => Promise<T>,
): Promise<T> {
  const asked = options.port === undefined ? undefined : wholeNumber(options.port, '--port', 0, 65535);
  try {
    return await listen(asked ?? PORT);
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'EADDRINUSE' && asked === undefined) {
      remark(session, `port ${PORT} is taken, so the dashboard takes a free one; --port chooses`);
      return await listen(0);
    }
    if (code === undefined || !REASONS.has(code)) throw error;
    const place = `${options.bind}:${asked ?? PORT}`;
    throw new Broken('no-port', `the dashboard cannot listen on ${place}: ${REASONS.get(code)}`, {
      cause: error,
    });
  }
}

const REASONS = new Map([
  ['EADDRINUSE', 'the port is taken'],
  ['EACCES', 'no right to use the port'],
  ['EADDRNOTAVAIL', 'this machine has no such address'],
  ['ENOTFOUND', 'no such address'],
]);

/** Resolves when somebody asks for the end. */
export function asked(signal: AbortSignal): Promise<void> {
  if (signal.aborted) return Promise.resolve();
  return new Promise((resolve) => signal.addEventListener('abort', () => resolve(), { once: true }));
}
