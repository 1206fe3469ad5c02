import type { Mistake } from './scan/plan.js';

/** The three kinds of trouble that end a command, each with a stable code and an exit status.
 *  (A failed point is none of them: it is a result.) */
export class Trouble extends Error {
  constructor(
    readonly code: string,
    readonly exit: 1 | 2 | 3,
    message: string,
    options?: { cause?: unknown },
  ) {
    super(message, options);
    this.name = 'Trouble';
  }
}

/** The user's mistake, outside a scan file: what was expected, what was found, where. */
export class UserMistake extends Trouble {
  constructor(what: { expected: string; found: string; where: string; hint?: string }) {
    super(
      'user-mistake',
      2,
      `${what.where}: expected ${what.expected}, found ${what.found}${what.hint ? ` (${what.hint})` : ''}`,
    );
  }
}

/** Every mistake of one file, reported together. */
export class FileMistakes extends Trouble {
  constructor(
    readonly file: string,
    readonly mistakes: readonly Mistake[],
  ) {
    super('file-mistakes', 2, mistakes.map((mistake) => describe(file, mistake)).join('\n'));
  }
}

function describe(file: string, m: Mistake): string {
  const place = m.line > 0 ? `${file}:${m.line}:${m.column}` : file;
  const hint = m.hint ? ` (${m.hint})` : '';
  return `${place}${m.path ? ` ${m.path}` : ''}: expected ${m.expected}, found ${m.found}${hint}`;
}

/** A broken store or environment. */
export class Broken extends Trouble {
  constructor(code: string, message: string, options?: { cause?: unknown }) {
    super(code, 3, message, options);
  }
}

/** A promise that did not hold: a digest that differs, points that stayed unfinished. */
export class NotHeld extends Trouble {
  constructor(code: string, message: string) {
    super(code, 1, message);
  }
}
