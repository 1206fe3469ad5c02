import { afterAll, beforeAll, describe } from 'vitest';
import { openRedis } from '../../orchestrator/dispatch/redis.js';
import { openThreads } from '../../orchestrator/dispatch/threads.js';
import { dispatcherContract, PROGRAM } from './dispatcher-contract.js';
import { fleetProcess } from './fleet.js';
import { noRedis, redisServer, type RedisServer } from './redis-server.js';

describe('worker threads', () => {
  dispatcherContract((limits) =>
    Promise.resolve({
      open: openThreads(limits.threads, { program: PROGRAM, ...limits }),
      stop: () => Promise.resolve(),
    }),
  );
});

describe.skipIf(noRedis)('a fleet over Redis (skipped where redis-server is not on the PATH)', () => {
  let server: RedisServer;
  beforeAll(async () => {
    server = await redisServer({ appendOnly: false });
  });
  afterAll(() => server.stop());

  dispatcherContract(async (limits) => {
    const worker = await fleetProcess(server.url, { ...limits, program: PROGRAM, code: 'test' });
    return {
      open: openRedis(server.url, { code: 'test' }),
      stop: () => worker.end('SIGKILL'),
    };
  });
});
