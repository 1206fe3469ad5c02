import { Redis } from 'ioredis';
import { Broken } from '../mistakes.js';

/** A connection that waits for a server that restarts instead of failing its commands.
 *  @throws Broken 'redis-unreachable' if nobody answers within `seconds` */
export async function connectRedis(url: string, seconds: number): Promise<Redis> {
  const redis = new Redis(url, {
    maxRetriesPerRequest: null,
    retryStrategy: (times) => Math.min(100 * times, 1000),
    lazyConnect: true,
  });
  let last = 'no answer';
  redis.on('error', (error: Error) => (last = error.message));
  void redis.connect().catch(() => undefined);
  const answered = await within(seconds * 1000, redis.ping());
  if (answered) return redis;
  redis.disconnect();
  throw new Broken('redis-unreachable', `no Redis answers at ${withoutPassword(url)}: ${last}`);
}

/** Calls `lost` once if the server stays away for `minutes`. */
export function watchRedis(redis: Redis, minutes: number, lost: () => void): { stop(): void } {
  let clock: NodeJS.Timeout | undefined;
  const onReady = () => {
    clearTimeout(clock);
    clock = undefined;
  };
  // Every attempt to connect again that fails is one more close.
  const onClose = () => {
    clock ??= setTimeout(lost, minutes * 60_000);
  };
  redis.on('ready', onReady).on('close', onClose);
  return {
    stop() {
      redis.off('ready', onReady).off('close', onClose);
      clearTimeout(clock);
    },
  };
}

/** What became of a promise within the time, or undefined; its rejection counts as nothing. */
export async function within<T>(milliseconds: number, promise: Promise<T>): Promise<T | undefined> {
  let clock: NodeJS.Timeout | undefined;
  const late = new Promise<undefined>((resolve) => {
    clock = setTimeout(() => resolve(undefined), milliseconds);
  });
  const answer = await Promise.race([promise.catch(() => undefined), late]);
  clearTimeout(clock);
  return answer;
}

/** An address fit for messages. */
export function withoutPassword(url: string): string {
  return url.replace(/\/\/[^@/]*@/, '//');
}
