import { Command, CommanderError } from 'commander';
import { packageVersion } from '../provenance/environment.js';
import { askCatalogue } from './ask-catalogue.js';
import { askRuns } from './ask-runs.js';
import { makeRuns } from './make-runs.js';
import { serveAndWork } from './serve-and-work.js';
import type { Session, Surroundings } from './session.js';
import { tellTrouble } from './trouble.js';

/** Carries out one command line and ends the process with its status:
 *  0 done, 1 a check did not hold, 2 the user's mistake, 3 broken store or environment, 130 after Ctrl-C. */
export async function runProgram(words: readonly string[], surroundings: Surroundings): Promise<never> {
  const stop = new AbortController();
  let listening = false;
  const session: Session = {
    ...surroundings,
    answered: false,
    stopSignal() {
      listening = true;
      return stop.signal;
    },
  };
  const interrupt = (status: number) => () => {
    // The second time, or where nobody would stop cleanly: at once.
    if (!listening || stop.signal.aborted) process.exit(status);
    stop.abort(status);
  };
  process.on('SIGINT', interrupt(130));
  process.on('SIGTERM', interrupt(143));
  // Nobody reads on (`trigpoint export 3 | head`): that is how the reader says it has enough.
  surroundings.out.on('error', (error: NodeJS.ErrnoException) =>
    process.exit(error.code === 'EPIPE' ? 0 : 3),
  );
  surroundings.err.on('error', () => undefined);
  const status = await carryOut(words, session);
  process.exit(status);
}

async function carryOut(words: readonly string[], session: Session): Promise<number> {
  try {
    const program = programFor(session);
    await program.parseAsync(words.length === 0 ? ['--help'] : words, { from: 'user' });
    return 0;
  } catch (error) {
    if (error instanceof CommanderError && error.exitCode === 0) return 0;
    return await tellTrouble(error, words.includes('--json'), session);
  }
}

function programFor(session: Session): Command {
  const program = new Command('trigpoint')
    .description(
      'Parameter scans of theories beyond the Standard Model that can be returned to, point by point.',
    )
    .version(packageVersion(), '-V, --version', 'print the version')
    .helpCommand('help [command]', 'print the help of a command')
    .exitOverride()
    .configureOutput({
      writeOut: (text) => void session.out.write(text),
      // Errors are told once, in one line, by tellTrouble.
      writeErr: () => undefined,
    })
    .configureHelp({ sortOptions: false, showGlobalOptions: false });
  for (const group of [makeRuns, askRuns, askCatalogue, serveAndWork]) group(program, session);
  program.addHelpText('after', OVERVIEW);
  return program;
}

const OVERVIEW = `
Example:
  $ trigpoint launch scans/electroweak-vacuum.yaml --serve

Exit status: 0 done; 1 a check did not hold or a run is incomplete; 2 a mistake in what was asked;
3 broken store or environment; 130 after Ctrl-C (the run is paused, launching it again resumes).
RUN is the id of a run, "latest", or the first six or more digits of a digest.`;
