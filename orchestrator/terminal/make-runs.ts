import type { Command } from 'commander';
import { check } from '../commands/check.js';
import { extend } from '../commands/extend.js';
import type { ExtendRequest } from '../commands/extend.js';
import { launch } from '../commands/launch.js';
import type { LaunchFacts } from '../commands/launch.js';
import { rejudge } from '../commands/rejudge.js';
import { checkSameDigest, rerun } from '../commands/rerun.js';
import { checkComplete } from '../commands/run-facts.js';
import type { RunAccount } from '../commands/run-facts.js';
import { checkText } from './check-text.js';
import { asked, openDashboard } from './dashboard.js';
import type { OpenDashboard } from './dashboard.js';
import { readUserFile } from './files.js';
import { endIfStopped, follow } from './follow.js';
import { example, withJson, withPlace, withStore, withWorkers, workerCount } from './options.js';
import type { FactOptions, PlaceOptions, WorkerOptions } from './options.js';
import { launchText, rerunText, runText } from './run-text.js';
import { answer, remark } from './session.js';
import type { JsonOption, Session } from './session.js';

type RunOptions = FactOptions & WorkerOptions;

/** Commands that make runs: check, launch, rerun, extend, rejudge. */
export function makeRuns(program: Command, session: Session): void {
  checkCommand(program, session);
  launchCommand(program, session);
  rerunCommand(program, session);
  extendCommand(program, session);
  rejudgeCommand(program, session);
}

function checkCommand(program: Command, session: Session): void {
  const command = program
    .command('check <file>')
    .description('validate a scan file, print its plan and what it will cost; writes nothing')
    .option('--workers <n>', 'how many workers the estimate is for');
  example(withJson(command), 'check scans/electroweak-vacuum.yaml').action(
    async (file: string, options: JsonOption & WorkerOptions) => {
      const scan = { bytes: readUserFile(file), file };
      await answer(session, options, check(scan, workerCount(options, session)), checkText);
    },
  );
}

function launchCommand(program: Command, session: Session): void {
  const command = program
    .command('launch <file>')
    .description('run a scan file; launched again, it resumes, or shows the finished run')
    .option('--serve', 'open the dashboard and leave it open on the finished run');
  example(
    withPlace(withJson(withStore(withWorkers(command, session)))),
    'launch scans/electroweak-vacuum.yaml --serve',
  ).action((file: string, options: RunOptions & LaunchOptions) => launchAndServe(file, options, session));
}

interface LaunchOptions extends PlaceOptions {
  readonly serve?: boolean;
}

/** Ctrl-C pauses the run (status 130); after the run it only closes the dashboard (status of the run). */
async function launchAndServe(
  file: string,
  options: RunOptions & LaunchOptions,
  session: Session,
): Promise<void> {
  const scan = { bytes: readUserFile(file), file };
  let dashboard: OpenDashboard | undefined;
  try {
    const facts = await follow(
      options,
      session,
      (work) => launch(scan, work),
      async ({ run }) => {
        if (!options.serve) return;
        dashboard = await openDashboard(options.store, options, session);
        remark(session, `dashboard ${pageOf(dashboard, run)}`);
      },
    );
    const stays = dashboard !== undefined && !session.stopSignal().aborted;
    const page = dashboard && stays ? { dashboard: pageOf(dashboard, facts.run) } : {};
    await answer<LaunchFacts>(session, options, { ...facts, ...page }, launchText);
    endIfStopped(facts, session);
    if (dashboard) await keepOpen(session);
    checkComplete(facts);
  } finally {
    await dashboard?.close();
  }
}

function pageOf(dashboard: OpenDashboard, run: number): string {
  return `${dashboard.address}/runs/${run}`;
}

async function keepOpen(session: Session): Promise<void> {
  remark(session, 'the dashboard stays open; Ctrl-C closes it');
  await asked(session.stopSignal());
}

function rerunCommand(program: Command, session: Session): void {
  const command = program
    .command('rerun <run>')
    .description('execute the stored plan of a run again, every point of it, and compare the digests');
  example(withJson(withStore(withWorkers(command, session))), 'rerun latest').action(
    async (run: string, options: RunOptions) => {
      const facts = await follow(options, session, (work) => rerun(run, work));
      await answer(session, options, facts, rerunText);
      endIfStopped(facts, session);
      checkComplete(facts);
      checkSameDigest(facts);
    },
  );
}

function extendCommand(program: Command, session: Session): void {
  const command = program
    .command('extend <run>')
    .description('a child run with more points, a wider range or a finer grid; earlier results are reused')
    .option('--points <n...>', 'new total of points, or STRATUM=N')
    .option(
      '--vary <axis...>',
      'INPUT=FROM:TO for a wider range, INPUT=FROM:TO:STEPS for a finer grid, INPUT=A,B,C for a longer list',
    );
  example(
    withJson(withStore(withWorkers(command, session))),
    'extend latest --points 40000',
    'extend 3 --vary Mt=160:185',
  ).action(async (run: string, options: RunOptions & ExtendRequest) => {
    const facts = await follow(options, session, (work) => extend(run, options, work));
    for (const note of facts.notes) remark(session, note);
    await finishRun(facts, options, session);
  });
}

function rejudgeCommand(program: Command, session: Session): void {
  const command = program
    .command('rejudge <run>')
    .description('a child run with the same points, judged again from what is stored')
    .option('--with <file>', 'a scan file, or a piece of one, whose require and note are used instead');
  example(withJson(withStore(command)), 'rejudge latest --with stricter.yaml').action(
    async (run: string, options: RunOptions & { readonly with?: string }) => {
      const scan =
        options.with === undefined ? undefined : { bytes: readUserFile(options.with), file: options.with };
      const facts = await follow(options, session, (work) => rejudge(run, scan, work));
      await finishRun(facts, options, session);
    },
  );
}

async function finishRun(facts: RunAccount, options: JsonOption, session: Session): Promise<void> {
  await answer(session, options, facts, runText);
  endIfStopped(facts, session);
  checkComplete(facts);
}
