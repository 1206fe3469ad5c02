import { Option } from 'commander';
import type { Command } from 'commander';
import { wholeNumber } from '../commands/assignments.js';
import { USUAL_STORE } from '../commands/read-store.js';
import type { OpenDispatcher } from '../dispatch/dispatcher.js';
import { openThreads } from '../dispatch/threads.js';
import { UserMistake } from '../mistakes.js';
import { remark } from './session.js';
import type { JsonOption, Session } from './session.js';

/** Options that several commands share, each in one place. */

export const PORT = 4671;

export interface StoreOption {
  readonly store: string;
}

export interface WorkerOptions {
  readonly workers?: string;
  readonly redis?: string;
}

export interface PlaceOptions {
  readonly port?: string;
  readonly bind: string;
}

export type FactOptions = JsonOption & StoreOption;

export function withStore(command: Command): Command {
  return command.option('--store <file>', 'the store', USUAL_STORE);
}

export function withJson(command: Command): Command {
  return command.option('--json', 'print one JSON document');
}

export function withWorkers(command: Command, session: Session): Command {
  return command
    .addOption(new Option('--workers <n>', `worker threads of this process (default: ${session.cores})`))
    .addOption(
      new Option('--redis <url>', 'use the fleet on this Redis instead (default: REDIS_URL, if set)'),
    );
}

export function withPlace(command: Command): Command {
  return command
    .option('--port <n>', `port of the dashboard (default: ${PORT}, or a free one)`)
    .option('--bind <address>', 'address to listen on; another one only inside a container', '127.0.0.1');
}

export function example(command: Command, ...lines: readonly string[]): Command {
  return command.addHelpText(
    'after',
    `\nExample:\n${lines.map((line) => `  $ trigpoint ${line}`).join('\n')}`,
  );
}

/** Threads of this process, or the fleet where a Redis is named.
 *  @throws UserMistake where both are asked for, or a number of workers makes no sense */
export function dispatcherFor(options: WorkerOptions, session: Session): OpenDispatcher {
  if (options.redis !== undefined && options.workers !== undefined)
    throw new UserMistake({
      where: '--workers',
      expected: 'either --workers or --redis',
      found: 'both',
      hint: 'a fleet has as many workers as you start with: trigpoint worker',
    });
  const redis = options.redis ?? (options.workers === undefined ? session.redis : undefined);
  if (redis === undefined) return openThreads(workerCount(options, session));
  checkRedisUrl(redis);
  return async (task, scope) => {
    remark(session, 'chunks go to the fleet on Redis: trigpoint worker adds a worker to it');
    // Loaded only where it is wanted: it takes longer than most commands.
    const { openRedis } = await import('../dispatch/redis.js');
    return openRedis(redis)(task, scope);
  };
}

export function workerCount(options: WorkerOptions, session: Session): number {
  return options.workers === undefined ? session.cores : wholeNumber(options.workers, '--workers', 1, 1024);
}

/** @throws UserMistake for anything but a redis: or rediss: address */
export function checkRedisUrl(text: string): void {
  const url = URL.canParse(text) ? new URL(text) : undefined;
  if (url && /^rediss?:$/.test(url.protocol)) return;
  throw new UserMistake({
    where: '--redis',
    expected: 'an address such as redis://127.0.0.1:6379',
    found: JSON.stringify(text.replace(/\/\/[^@/]*@/, '//***@')),
  });
}
