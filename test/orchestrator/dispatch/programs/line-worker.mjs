// A tiny real worker for whole runs: every point has one input x, whole numbers in order. Options of the model say
// at which x it misbehaves; with `once`, the name of a file that must not exist yet, it does so a single time.
// keep[0] = x + 1, keep[1] = x * x; a point survives if x is even.
import { existsSync, writeFileSync } from 'node:fs';
import { parentPort, workerData } from 'node:worker_threads';

const { task } = workerData;
const { hangAt, exitAt, throwAt, outOfMemoryAt, killAt, once, microseconds = 0 } = task.model.options;

parentPort.on('message', ({ id, points: { count, values } }) => {
  const began = performance.now();
  // The grid divides its range: its numbers are whole but for rounding.
  const points = { count, values: values.map(Math.round) };
  const has = (x) => x !== undefined && points.values.includes(x) && !isOver();
  if (has(hangAt)) for (;;);
  if (has(exitAt)) process.exit(3);
  if (has(throwAt)) throw new Error('thrown by the test program');
  if (has(outOfMemoryAt)) fillHeap();
  if (has(killAt)) process.kill(process.pid, 'SIGKILL');
  if (microseconds > 0 && points.count > 0) wait((microseconds * points.count) / 1000);
  const result = evaluate(points);
  const buffers = Object.values(result)
    .filter((part) => ArrayBuffer.isView(part))
    .map((part) => part.buffer);
  parentPort.postMessage({ id, result, milliseconds: performance.now() - began }, buffers);
});

function isOver() {
  if (once === undefined) return false;
  if (existsSync(once)) return true;
  writeFileSync(once, '');
  return false;
}

function evaluate({ count, values }) {
  const judged = task.constraints.length * count;
  const quantities = new Float64Array(task.keep.length * count);
  const verdicts = new Uint8Array(count);
  const margins = new Float64Array(judged);
  const outcomes = new Uint8Array(judged);
  for (let i = 0; i < count; i += 1) {
    quantities[i] = values[i] + 1;
    quantities[count + i] = values[i] * values[i];
    verdicts[i] = outcomes[i] = values[i] % 2;
    margins[i] = 0.5 - verdicts[i];
  }
  return {
    count,
    quantities,
    outcomes,
    margins,
    logLikelihoods: new Float64Array(judged).fill(NaN),
    failures: new Uint8Array(count),
    verdicts,
  };
}

function fillHeap() {
  const hoard = [];
  for (;;) hoard.push(new Array(1000).fill(hoard.length));
}

function wait(milliseconds) {
  Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, milliseconds);
}
