import { Option } from 'commander';
import type { Command } from 'commander';
import { finiteNumber } from '../commands/assignments.js';
import { compare } from '../commands/compare.js';
import { exportRun, FORMATS } from '../commands/export.js';
import type { Format } from '../commands/export.js';
import { list } from '../commands/list.js';
import { withReading } from '../commands/read-store.js';
import { checkComplete } from '../commands/run-facts.js';
import { show } from '../commands/show.js';
import { checkVerified, verify } from '../commands/verify.js';
import { checkNotAbandoned, watch } from '../commands/watch.js';
import { UserMistake } from '../mistakes.js';
import { compareText } from './compare-text.js';
import { count } from './numbers.js';
import { dispatcherFor, example, withJson, withStore, withWorkers } from './options.js';
import type { FactOptions, StoreOption, WorkerOptions } from './options.js';
import { progressBar } from './progress-bar.js';
import { listText, runText } from './run-text.js';
import { answer, remark, write } from './session.js';
import type { JsonOption, Session } from './session.js';
import { showText } from './show-text.js';
import { Stopped } from './trouble.js';
import { verifyText } from './verify-text.js';

/** Commands that ask what there is in a store: watch, list, show, verify, compare, export. */
export function askRuns(program: Command, session: Session): void {
  watchCommand(program, session);
  listCommand(program, session);
  showCommand(program, session);
  verifyCommand(program, session);
  compareCommand(program, session);
  exportCommand(program, session);
}

function watchCommand(program: Command, session: Session): void {
  const command = program
    .command('watch [run]')
    .description('live progress of a run that any process works on, until it stops');
  example(withJson(withStore(command)), 'watch latest').action(
    (word: string | undefined, options: FactOptions) =>
      withReading(options.store, async (reading) => {
        const bar = progressBar(session.err);
        const signal = session.stopSignal();
        const facts = await watch(reading, word ?? 'latest', {
          progress: (p) => bar.show(p),
          signal,
        }).finally(() => bar.end());
        await answer(session, options, facts, runText);
        if (signal.aborted) throw new Stopped(Number(signal.reason));
        checkNotAbandoned(facts);
        checkComplete(facts);
      }),
  );
}

function listCommand(program: Command, session: Session): void {
  const command = program.command('list').description('the runs of a store');
  example(withJson(withStore(command)), 'list --store trigpoint.sqlite').action((options: FactOptions) =>
    withReading(options.store, (reading) => answer(session, options, list(reading), listText)),
  );
}

function showCommand(program: Command, session: Session): void {
  const command = program.command('show <run>').description('a run: counts, digest, cut-flow, provenance');
  example(withJson(withStore(command)), 'show latest').action((run: string, options: FactOptions) =>
    withReading(options.store, (reading) => answer(session, options, show(reading, run), showText)),
  );
}

function verifyCommand(program: Command, session: Session): void {
  const command = program
    .command('verify <run>')
    .description('compute points of a run again and compare them bit by bit; read every stored byte again')
    .option('--sample <p>', 'part of the points, evenly spread, e.g. 0.05 or 5%', '1');
  example(withJson(withStore(withWorkers(command, session))), 'verify latest --sample 0.05').action(
    (run: string, options: FactOptions & WorkerOptions & { readonly sample: string }) =>
      withReading(options.store, async (reading) => {
        const signal = session.stopSignal();
        const facts = await verify(reading, run, {
          part: partOf(options.sample),
          open: dispatcherFor(options, session),
          signal,
          onProgress: counter(session, 'points computed again'),
        });
        await answer(session, options, facts, verifyText);
        checkVerified(facts);
        if (signal.aborted) throw new Stopped(Number(signal.reason));
      }),
  );
}

function partOf(text: string): number {
  const part = text.endsWith('%')
    ? finiteNumber(text.slice(0, -1), '--sample') / 100
    : finiteNumber(text, '--sample');
  if (part > 0 && part <= 1) return part;
  throw new UserMistake({ where: '--sample', expected: 'a part above 0 and at most 1', found: text });
}

/** A line now and then, on standard error. */
function counter(session: Session, what: string): (done: number, all: number) => void {
  let told = 0;
  return (done, all) => {
    if (done < all && Date.now() - told < 2000) return;
    told = Date.now();
    remark(session, `${count(done)} of ${count(all)} ${what}`);
  };
}

function compareCommand(program: Command, session: Session): void {
  const command = program
    .command('compare <run> <other>')
    .description('points whose verdict or values changed between two runs, and what explains it');
  example(withJson(withStore(command)), 'compare 1 2').action(
    (first: string, second: string, options: FactOptions) =>
      withReading(options.store, (reading) =>
        answer(session, options, compare(reading, first, second), compareText),
      ),
  );
}

interface ExportOptions extends StoreOption, JsonOption {
  readonly format: Format;
  readonly surviving?: boolean;
  readonly where?: string;
  readonly columns?: string;
  readonly out?: string;
}

function exportCommand(program: Command, session: Session): void {
  const command = program
    .command('export <run>')
    .description('write points to a file, or CSV to standard output; a CSV file gets a description beside it')
    .addOption(new Option('--format <format>', 'what to write').choices(FORMATS).default('csv'))
    .option('--surviving', 'surviving points only')
    .option('--where <expression>', 'points for which this holds, e.g. "lambdaMin < 0 and Mt > 172"')
    .option('--columns <names>', 'columns to write, separated by commas (default: all)')
    .option('--out <file>', 'the file to write (needed for parquet and sqlite)');
  example(
    withJson(withStore(command)),
    'export latest --surviving --columns Mt,Mh,lambdaMin --out alive.csv',
    'export latest --where "Mt < 172" | head',
  ).action(async (run: string, options: ExportOptions) => {
    if (options.json && options.out === undefined)
      throw new UserMistake({ where: 'export --json', expected: '--out FILE', found: 'none' });
    const facts = await exportRun(run, options, (text) => write(session, text));
    if (facts.file === null) return;
    const rows = `${count(facts.points)} points in ${facts.file}`;
    const beside = facts.description === null ? '' : `, described in ${facts.description}`;
    await answer(session, options, facts, () => `${rows}${beside}`);
  });
}
