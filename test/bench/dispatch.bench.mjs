/** Points of the Standard Model through worker threads and through a fleet over Redis, against the same points in a
 *  plain loop; then through threads that do almost nothing, which is what dispatching alone could carry. */
import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { availableParallelism, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { openRedis } from '../../dist/orchestrator/dispatch/redis.js';
import { openThreads } from '../../dist/orchestrator/dispatch/threads.js';
import { samplerOf } from '../../dist/orchestrator/sampling/sampler.js';
import { readScan } from '../../dist/orchestrator/scan/read-scan.js';
import { taskOf } from '../../dist/orchestrator/scan/task.js';
import { createEvaluator } from '../../dist/workers/evaluate.js';

const CLI = fileURLToPath(new URL('../../dist/orchestrator/cli.js', import.meta.url));
const POINTS = Number(process.env.TRIGPOINT_BENCH_POINTS ?? 8192);
const CHUNK = 512;
const ROUNDS = 3;
const IDLE = fileURLToPath(new URL('../orchestrator/dispatch/programs/line-worker.mjs', import.meta.url));
const PORT = 17391;
const CORES = availableParallelism();
const scan = (loops) => `
model: sm
seed: bench
sample: { method: sobol, points: ${POINTS} }
vary:
  Mt: { range: [165, 180], unit: GeV }
  Mh: { range: [115, 135], unit: GeV }
running: { loops: ${loops} }
require: [perturbativity, vacuum-stability]
`;

const folder = mkdtempSync(join(tmpdir(), 'trigpoint-bench-'));
const redis = spawnSync('redis-server', ['--version']).error ? undefined : await startRedis();
try {
  if (!redis) console.log('no redis-server on the PATH: the fleet is left out');
  for (const loops of [1, 3]) await bench(loops);
} finally {
  redis?.stop();
  rmSync(folder, { recursive: true, force: true });
}

async function bench(loops) {
  const { plan } = readScan(Buffer.from(scan(loops)), 'bench.yaml');
  const task = taskOf(plan);
  const chunks = [];
  for (let first = 0; first < POINTS; first += CHUNK) {
    chunks.push(samplerOf(plan, 0).fill(first, Math.min(CHUNK, POINTS - first)));
  }
  const evaluator = createEvaluator(task);
  const ways = [
    ['a plain loop in one thread', () => plainly(evaluator, chunks)],
    ...[...new Set([1, CORES])].map((threads) => [
      `${threads} worker threads`,
      () => through(openThreads(threads), task, chunks),
    ]),
    ['threads that do almost nothing', () => through(openThreads(CORES, { program: IDLE }), task, chunks)],
  ];
  if (redis)
    ways.push([`a fleet of ${CORES} threads over Redis`, () => through(openRedis(redis.url), task, chunks)]);
  const times = ways.map(() => Infinity);
  for (let round = 0; round < ROUNDS; round += 1) {
    for (const [i, [, run]] of ways.entries()) times[i] = Math.min(times[i], await run());
  }
  for (const [i, [what]] of ways.entries()) {
    const ratio = (times[0] / times[i]).toFixed(2);
    console.log(
      `${rate(times[i]).padStart(9)} points/s  ${ratio.padStart(6)} x a plain loop:  ${what}, ${loops} loops`,
    );
  }
}

function plainly(evaluator, chunks) {
  const start = performance.now();
  for (const points of chunks) evaluator.evaluate(points);
  return performance.now() - start;
}

/** Wall time of all chunks in milliseconds, after a first one that starts everything. */
async function through(open, task, chunks) {
  const dispatcher = await open(task, `bench-${process.pid}-${Math.round(performance.now())}`);
  try {
    await all(dispatcher, chunks.slice(0, CORES), 0);
    const start = performance.now();
    await all(dispatcher, chunks, 1);
    return performance.now() - start;
  } finally {
    await dispatcher.close();
  }
}

/** A dispatcher takes an id once: what is timed is another stratum than the start. */
function all(dispatcher, chunks, stratum) {
  return new Promise((resolve, reject) => {
    let next = 0;
    let done = 0;
    const submit = () => {
      if (next >= chunks.length) return;
      const { count, values } = chunks[next];
      dispatcher.submit({ id: `${stratum}.${next}.${count}`, points: { count, values: values.slice() } });
      next += 1;
    };
    dispatcher.onBroken(reject);
    dispatcher.onReport((report) => {
      if (report.kind !== 'done') return reject(new Error(JSON.stringify(report)));
      done += 1;
      if (done === chunks.length) resolve();
      else submit();
    });
    for (let i = 0; i < dispatcher.capacity(); i += 1) submit();
  });
}

async function startRedis() {
  const words = ['--port', PORT, '--bind', '127.0.0.1', '--save', '', '--dir', folder];
  const server = spawn('redis-server', words.map(String), { stdio: 'ignore' });
  const url = `redis://127.0.0.1:${PORT}`;
  const worker = spawn(process.execPath, [CLI, 'worker', '--redis', url, '--workers', String(CORES)]);
  await Promise.race([once(worker.stderr, 'data'), once(worker.stdout, 'data'), once(worker, 'exit')]);
  return {
    url,
    stop() {
      worker.kill('SIGKILL');
      server.kill('SIGKILL');
    },
  };
}

function rate(milliseconds) {
  return `${Math.round((1000 * POINTS) / milliseconds)}`;
}
