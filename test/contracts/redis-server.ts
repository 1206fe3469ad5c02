import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Redis } from 'ioredis';

/** Real Redis servers on free ports of the loopback, in temporary folders. */

export const noRedis = spawnSync('redis-server', ['--version']).error !== undefined;
if (noRedis && process.env.TRIGPOINT_REQUIRE_ALL === '1') throw new Error('redis-server is not on the PATH');
if (noRedis) console.log('tests over Redis: skipped, redis-server is not on the PATH');

export interface RedisServer {
  readonly url: string;
  readonly pid: () => number;
  /** kill -9; with `start`, as if the machine had lost power. */
  kill(): Promise<void>;
  /** Again on the same port and the same data. */
  start(): Promise<void>;
  stop(): Promise<void>;
}

export async function redisServer(options: { appendOnly: boolean }): Promise<RedisServer> {
  const folder = await mkdtemp(join(tmpdir(), 'trigpoint-redis-'));
  const port = await freePort();
  const url = `redis://127.0.0.1:${port}`;
  const words = ['--port', `${port}`, '--bind', '127.0.0.1', '--dir', folder, '--save', ''];
  const append = ['--appendonly', options.appendOnly ? 'yes' : 'no', '--appendfsync', 'always'];
  let server: ChildProcess | undefined;

  async function start(): Promise<void> {
    server = spawn('redis-server', [...words, ...append, '--maxmemory-policy', 'noeviction'], {
      stdio: 'ignore',
    });
    const redis = new Redis(url, { maxRetriesPerRequest: null, retryStrategy: () => 50 });
    redis.on('error', () => undefined);
    await redis.ping();
    redis.disconnect();
  }
  async function kill(): Promise<void> {
    if (!server || server.exitCode !== null || server.signalCode !== null) return;
    const gone = once(server, 'exit');
    server.kill('SIGKILL');
    await gone;
  }
  async function stop(): Promise<void> {
    await kill();
    await rm(folder, { recursive: true, force: true });
  }
  await start();
  return { url, pid: () => server?.pid ?? 0, kill, start, stop };
}

export async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  await once(probe, 'close');
  return port;
}
