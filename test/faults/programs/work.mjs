// A coordinator in a process of its own, so that it can be killed: node work.mjs ORDER, with ORDER the JSON of
// { store, newRun, threads | redis, ...options of the dispatcher }. Works on run 1 of the store, making it if it is
// not there. Prints the counts as they grow, last what became of the run.
import { coordinate } from '../../../dist/orchestrator/dispatch/coordinator.js';
import { openRedis } from '../../../dist/orchestrator/dispatch/redis.js';
import { openThreads } from '../../../dist/orchestrator/dispatch/threads.js';
import { openForWriting } from '../../../dist/orchestrator/store/open.js';

const order = JSON.parse(process.argv[2]);
const stop = new AbortController();
process.on('SIGINT', () => stop.abort());

try {
  const store = openForWriting(order.store);
  try {
    const done = await work(store);
    console.log(JSON.stringify({ ...done, peakMegabytes: process.resourceUsage().maxRSS / 1024 }));
  } finally {
    store.close();
  }
} catch (error) {
  console.error(error.message);
  process.exitCode = error.exit ?? 70;
}

function work(store) {
  const run = store.run(1)?.id ?? store.createRun(order.newRun);
  const open = order.redis ? openRedis(order.redis, order) : openThreads(order.threads, order);
  const onProgress = ({ counts, retried }) => console.log(JSON.stringify({ counts, retried }));
  return coordinate({ store, run, plan: order.newRun.plan, open, onProgress, signal: stop.signal });
}
