import type { Command } from 'commander';
import { UserMistake } from '../mistakes.js';
import { asked, openDashboard } from './dashboard.js';
import { checkRedisUrl, example, withJson, withPlace, withStore, workerCount } from './options.js';
import type { FactOptions, PlaceOptions, WorkerOptions } from './options.js';
import { answer, remark } from './session.js';
import type { Session } from './session.js';
import { Stopped } from './trouble.js';

/** Commands that stay: the dashboard, and a worker process of a fleet. */
export function serveAndWork(program: Command, session: Session): void {
  serveCommand(program, session);
  workerCommand(program, session);
}

function serveCommand(program: Command, session: Session): void {
  const command = program.command('serve').description('the dashboard on a store; Ctrl-C closes it');
  example(withPlace(withJson(withStore(command))), 'serve --port 8080').action(
    async (options: FactOptions & PlaceOptions) => {
      const signal = session.stopSignal();
      const dashboard = await openDashboard(options.store, options, session);
      const { address } = dashboard;
      await answer(session, options, { format: 1, dashboard: address }, () => `dashboard  ${address}`);
      await asked(signal);
      await dashboard.close();
    },
  );
}

function workerCommand(program: Command, session: Session): void {
  const command = program
    .command('worker')
    .description('a worker of the fleet on a Redis; takes chunks until Ctrl-C')
    .option('--redis <url>', 'the Redis of the fleet (default: REDIS_URL)')
    .option('--workers <n>', `threads that compute (default: ${session.cores})`);
  example(command, 'worker --redis redis://127.0.0.1:6379').action(async (options: WorkerOptions) => {
    const url = options.redis ?? session.redis;
    if (url === undefined)
      throw new UserMistake({ where: 'worker', expected: '--redis URL or REDIS_URL', found: 'neither' });
    checkRedisUrl(url);
    const signal = session.stopSignal();
    const threads = workerCount(options, session);
    const { runFleetWorker } = await import('../dispatch/fleet-worker.js');
    await runFleetWorker(url, { threads, signal, say: (line) => remark(session, line) });
    if (signal.aborted && signal.reason !== 130) throw new Stopped(Number(signal.reason));
  });
}
