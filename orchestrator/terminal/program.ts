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
  const stop = stopper();
  const session: Session = { ...surroundings, answered: false, stopSignal: stop.listen };
  // Nobody reads on (`trigpoint export 3 | head`): that is how a reader says it has enough.
  surroundings.out.on('error', (error: NodeJS.ErrnoException) =>
    process.exit(error.code === 'EPIPE' ? 0 : 3),
  );
  surroundings.err.on('error', () => undefined);
  process.on('uncaughtException', (error) => {
    void tellTrouble(error, false, session).then((status) => process.exit(status));
  });
  process.exit(await carryOut(words, session));
}

/** A terminal and npm both tell of one Ctrl-C: what comes so soon after is not a second one. */
const SAME_KEY_MS = 1000;

/** Ctrl-C and its like: a clean stop where a command listens, else, or the second time, the end at once. */
function stopper() {
  const controller = new AbortController();
  let listening = false;
  let told = 0;
  const interrupt = (status: number) => () => {
    if (!listening) process.exit(status);
    if (!controller.signal.aborted) {
      told = Date.now();
      controller.abort(status);
    } else if (Date.now() - told > SAME_KEY_MS) process.exit(status);
  };
  process.on('SIGINT', interrupt(130));
  process.on('SIGTERM', interrupt(143));
  process.on('SIGHUP', interrupt(129));
  return {
    listen: () => {
      listening = true;
      return controller.signal;
    },
  };
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
