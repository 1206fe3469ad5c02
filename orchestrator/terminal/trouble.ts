import { CommanderError } from 'commander';
import { FileMistakes, Trouble } from '../mistakes.js';
import type { Session } from './session.js';
import { remark, write } from './session.js';

/** What a command throws to end with another status after it has said all there is to say. */
export class Stopped extends Error {
  constructor(readonly status: number) {
    super('stopped');
  }
}

/** Tells an error in one line (a line for every mistake of a file) and returns the exit status.
 *  With --json and no document printed yet, the document says it. */
export async function tellTrouble(error: unknown, json: boolean, session: Session): Promise<number> {
  if (error instanceof Stopped) return error.status;
  const { code, exit, message } = describe(error);
  // Mistakes of a file begin with file:line:column, which editors follow.
  remark(session, error instanceof FileMistakes ? message : `trigpoint: ${message}`);
  if (session.debug && error instanceof Error) remark(session, stacks(error));
  if (json && !session.answered) {
    const mistakes = error instanceof FileMistakes ? { file: error.file, mistakes: error.mistakes } : {};
    const document = { format: 1, error: { code, exit, message, ...mistakes } };
    await write(session, `${JSON.stringify(document, null, 2)}\n`);
  }
  return exit;
}

function describe(error: unknown): { code: string; exit: number; message: string } {
  if (error instanceof FileMistakes) return error;
  if (error instanceof Trouble)
    return { code: error.code, exit: error.exit, message: oneLine(error.message) };
  if (error instanceof CommanderError)
    return { code: 'user-mistake', exit: 2, message: commandLine(error.message) };
  const text = error instanceof Error ? error.message : String(error);
  const hint = 'TRIGPOINT_DEBUG=1 shows where';
  return { code: 'unexpected', exit: 3, message: `unexpected trouble: ${oneLine(text)} (${hint})` };
}

/** "error: unknown command 'lanch'\n(Did you mean launch?)" -> one line of our form. */
function commandLine(message: string): string {
  return oneLine(message.replace(/^error: /, '').replace('(Did you', '(did you'));
}

function oneLine(text: string): string {
  return text.replace(/\s*\n\s*/g, ' ').trim();
}

function stacks(error: Error): string {
  const cause = error.cause instanceof Error ? `\ncaused by ${stacks(error.cause)}` : '';
  return `${error.stack ?? error.message}${cause}`;
}
