// A tiny real worker that speaks the messages of workers/entry.ts and misbehaves where the first input of a chunk
// says so. Result of a point with input x: keep[0] = x + 1, keep[1] = x * x, everything met, surviving.
import { parentPort, workerData } from 'node:worker_threads';

export const ORDERS = {
  hang: -1,
  throw: -2,
  exit: -3,
  outOfMemory: -4,
  answerTwice: -5,
  answerSlowly: -6,
  answerError: -7,
  wrongShape: -8,
  killProcess: -9,
};

const { task } = workerData;
if (task.model.name === 'does-not-load') throw new Error('no such model: does-not-load');

parentPort.on('message', ({ id, points }) => {
  const order = points.values[0];
  const reply = () => answer(id, evaluate(points));
  if (order === ORDERS.hang) for (;;);
  if (order === ORDERS.throw) throw new Error('thrown by the test program');
  if (order === ORDERS.exit) process.exit(3);
  if (order === ORDERS.outOfMemory) fillHeap();
  if (order === ORDERS.answerError)
    return parentPort.postMessage({ id, error: 'refused by the test program' });
  if (order === ORDERS.wrongShape) return answer(id, { ...evaluate(points), margins: new Float64Array(1) });
  if (order === ORDERS.killProcess) process.kill(process.pid, 'SIGKILL');
  if (order === ORDERS.answerSlowly) wait(1000);
  reply();
  if (order === ORDERS.answerTwice) reply();
});

function answer(id, result) {
  const buffers = Object.values(result)
    .filter((part) => ArrayBuffer.isView(part))
    .map((part) => part.buffer);
  parentPort.postMessage({ id, result, milliseconds: 1 }, buffers);
}

function evaluate({ count, values }) {
  const judged = task.constraints.length * count;
  const quantities = new Float64Array(task.keep.length * count);
  for (let i = 0; i < count; i += 1) {
    quantities[i] = values[i] + 1;
    quantities[count + i] = values[i] * values[i];
  }
  return {
    count,
    quantities,
    outcomes: new Uint8Array(judged),
    margins: new Float64Array(judged).fill(0.5),
    logLikelihoods: new Float64Array(judged).fill(NaN),
    failures: new Uint8Array(count),
    verdicts: new Uint8Array(count),
  };
}

function fillHeap() {
  const hoard = [];
  for (;;) hoard.push(new Array(1000).fill(hoard.length));
}

function wait(milliseconds) {
  Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, milliseconds);
}
