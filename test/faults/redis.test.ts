import { Redis } from 'ioredis';
import { afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { openRedis } from '../../orchestrator/dispatch/redis.js';
import { listen, PROGRAM, TASK, expectDone } from '../contracts/dispatcher-contract.js';
import { fleetProcess, type FleetProcess } from '../contracts/fleet.js';
import { noRedis, redisServer, type RedisServer } from '../contracts/redis-server.js';
import { LINE_WORKER, linePlan, temporaryStore } from '../orchestrator/dispatch/line-run.js';
import { committed, resultOf, startWork, undisturbedDigest } from './line-work.js';
import { endPrograms } from './processes.js';

/** A fleet over Redis, with workers, coordinators and servers that are really killed. */

const POINTS = [5000, 300];
const PLAN = linePlan(POINTS, { microseconds: 1000 });

describe.skipIf(noRedis)('with redis-server on the PATH', () => {
  let undisturbed: string;
  let server: RedisServer;
  let store: ReturnType<typeof temporaryStore>;
  const workers: FleetProcess[] = [];
  const undo: (() => unknown)[] = [];

  beforeAll(async () => {
    undisturbed = await undisturbedDigest(POINTS);
  });
  beforeEach(() => {
    store = temporaryStore();
  });
  afterEach(async () => {
    for (const step of undo.splice(0).reverse()) await step();
    for (const worker of workers.splice(0)) await worker.end('SIGKILL');
    await endPrograms();
    await server.stop();
    store.remove();
  });

  async function serve(appendOnly = false): Promise<void> {
    server = await redisServer({ appendOnly });
  }
  async function worker(options: object = {}): Promise<FleetProcess> {
    const started = await fleetProcess(server.url, {
      threads: 1,
      program: LINE_WORKER,
      code: 'test',
      ...options,
    });
    workers.push(started);
    return started;
  }
  const launch = (options: object = {}) => startWork(store.path, PLAN, { redis: server.url, ...options });
  const complete = () => ({ state: 'complete', digest: undisturbed });

  describe('a worker', () => {
    test('that is killed with kill -9 keeps its chunk no longer than 15 s, even if it was the last', async () => {
      await serve();
      const only = await worker({ program: PROGRAM });
      const dispatcher = await openRedis(server.url, { code: 'test' })(TASK, 'scope');
      undo.push(() => dispatcher.close());
      const { submit, report } = listen(dispatcher);
      submit('0.0.1', [-1]);
      await takenUp(server.url);
      await only.end('SIGKILL');
      const began = performance.now();
      expect(await report('0.0.1')).toMatchObject({ kind: 'lost', reason: 'worker-died' });
      expect(performance.now() - began).toBeLessThan(15_000);
    });

    test('that is killed with kill -9 does not change the results', async () => {
      await serve();
      const victim = await worker();
      await worker();
      const work = launch();
      await committed(work, 0);
      await victim.end('SIGKILL');
      expect(await resultOf(work)).toMatchObject(complete());
    });

    test('that was frozen and answers late, after its chunk was given to another, does no harm', async () => {
      await serve();
      const sleeper = await worker();
      await worker();
      const work = launch();
      await committed(work, 0);
      sleeper.process.kill('SIGSTOP');
      await work.says(/"retried":[1-9]/);
      sleeper.process.kill('SIGCONT');
      expect(await resultOf(work)).toMatchObject(complete());
    });

    test('that is told to stop finishes or gives back what it has, and ends with 0', async () => {
      await serve();
      const leaving = await worker();
      const work = launch();
      await committed(work, 0);
      await leaving.end('SIGTERM');
      expect(await leaving.exit).toBe(0);
      await worker();
      expect(await resultOf(work)).toMatchObject(complete());
    });

    test('with other code refuses, says so and ends; the chunk is not lost', async () => {
      await serve();
      const other = await worker({ code: 'other' });
      const work = launch();
      expect(await other.exit).toBe(3);
      expect(other.output()).toContain('another version of the code than the coordinator');
      await worker();
      expect(await resultOf(work)).toMatchObject(complete());
    });

    test('whose Redis stays away ends with a clear message', async () => {
      await serve();
      const lonely = await worker({ lostMinutes: 0.02 });
      await server.kill();
      expect(await lonely.exit).toBe(3);
      expect(lonely.output()).toContain('stayed away');
    });
  });

  describe('a coordinator', () => {
    test('that is killed with kill -9 is resumed while the fleet lives on', async () => {
      await serve();
      await worker();
      await worker();
      const first = launch();
      await committed(first, 0);
      first.signal('SIGKILL');
      await first.exit;
      expect(await resultOf(launch())).toMatchObject(complete());
    });

    test('takes no answer to another question for its own', async () => {
      await serve();
      const dispatcher = await openRedis(server.url, { code: 'test' })(TASK, 'scope');
      undo.push(() => dispatcher.close());
      const { submit, report } = listen(dispatcher);
      submit('0.0.1', [7]);
      const redis = new Redis(server.url);
      undo.push(() => redis.disconnect());
      const body = Buffer.alloc(2 * 8 + 8 + 8 + 1 + 1 + 1);
      const about = ['kind', 'done', 'id', '0.0.1', 'worker', 'w', 'milliseconds', '1'];
      await redis.xadd('trigpoint-results:scope', '*', ...about, 'key', 'of another chunk', 'body', body);
      await worker({ program: PROGRAM });
      expect(expectDone(await report('0.0.1')).result.quantities[0]).toBe(8);
    });
  });

  describe('a Redis server', () => {
    test.each([
      ['with an append-only file', true],
      ['without one, losing the whole queue', false],
    ])('that is killed with kill -9 and comes back %s', async (_, appendOnly) => {
      await serve(appendOnly);
      await worker();
      await worker();
      const work = launch();
      await committed(work, 0);
      await server.kill();
      await server.start();
      expect(await resultOf(work)).toMatchObject(complete());
    });

    test('that is emptied while it runs', async () => {
      await serve();
      await worker();
      await worker();
      const work = launch();
      await committed(work, 0);
      const redis = new Redis(server.url);
      await redis.flushall();
      redis.disconnect();
      expect(await resultOf(work)).toMatchObject(complete());
    });

    test('that is lost for good ends the launch with 1; what was committed is kept', async () => {
      await serve();
      await worker();
      const work = launch({ lostMinutes: 0.02 });
      await committed(work, 0);
      await server.kill();
      expect(await work.exit).toBe(1);
      expect(work.err()).toContain('launch again to go on');
      const reading = store.open();
      expect(reading.run(1)).toMatchObject({ state: 'paused', digest: null });
      expect(reading.run(1)?.counts.points).toBeGreaterThan(0);
      expect(reading.attempted(1)).toEqual([]);
      reading.close();
      await server.start();
      await worker();
      expect(await resultOf(launch())).toMatchObject(complete());
    });

    test('is left as it was found, but for what vanishes by itself', async () => {
      await serve();
      await worker();
      expect(await resultOf(launch())).toMatchObject(complete());
      const redis = new Redis(server.url);
      undo.push(() => redis.disconnect());
      const left: string[] = [];
      for (const key of await redis.keys('*')) if ((await redis.ttl(key)) < 0) left.push(key);
      // The books of the queue and the roll of its workers, whatever the number of runs.
      expect(left.sort()).toEqual([
        'bull:trigpoint:events',
        'bull:trigpoint:id',
        'bull:trigpoint:meta',
        'trigpoint-workers',
      ]);
      expect(await redis.xlen((await redis.keys('trigpoint-results:*'))[0] ?? 'none')).toBe(0);
    });

    test('that is not there is a clear refusal', async () => {
      await serve();
      await server.kill();
      const open = openRedis(server.url.replace('//', '//user:secret@'), { code: 'test', reachSeconds: 1 });
      await expect(open(TASK, 'scope')).rejects.toThrow(`no Redis answers at ${server.url}`);
    });
  });
});

/** Resolves once a worker has a chunk in hand. */
async function takenUp(url: string): Promise<void> {
  const redis = new Redis(url);
  while ((await redis.llen('bull:trigpoint:active')) === 0)
    await new Promise((resolve) => setImmediate(resolve));
  redis.disconnect();
}
