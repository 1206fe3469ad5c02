import type { Writable } from 'node:stream';
import type { AsyncQuestions } from '../store/reading.js';
import type { Screen } from './progress-bar.js';

/** Starts the dashboard on a store; handed in by cli.ts, the only place that knows it. */
export type ServeDashboard = (
  what: { readonly questions: AsyncQuestions; readonly store: string },
  place: { readonly port: number; readonly host: string },
) => Promise<{ readonly address: string; close(): Promise<void> }>;

/** What cli.ts hands over of the process. */
export interface Surroundings {
  readonly out: Writable;
  readonly err: Writable & Screen;
  /** REDIS_URL, if it is set. */
  readonly redis: string | undefined;
  /** Show stack traces. */
  readonly debug: boolean;
  readonly cores: number;
  readonly serveDashboard: ServeDashboard;
}

/** What a command works with. */
export interface Session extends Surroundings {
  /** From now on Ctrl-C asks for a clean stop instead of ending the process at once. */
  stopSignal(): AbortSignal;
  /** True once a document or text was printed: an error then has no document of its own. */
  answered: boolean;
}

export interface JsonOption {
  readonly json?: boolean;
}

/** Prints what a command found out: one JSON document, or text for people. */
export async function answer<F extends object>(
  session: Session,
  options: JsonOption,
  facts: F,
  text: (facts: F) => string,
): Promise<void> {
  session.answered = true;
  await write(session, `${options.json ? JSON.stringify(facts, null, 2) : text(facts)}\n`);
}

/** Writes to standard output and waits while its reader is slow. */
export function write(session: Session, text: string): Promise<void> {
  return new Promise((resolve, reject) => {
    session.out.write(text, (error) => (error ? reject(error) : resolve()));
  });
}

/** A remark for people beside the facts: standard error. */
export function remark(session: Session, text: string): void {
  session.err.write(`${text}\n`);
}
