import { parentPort, workerData } from 'node:worker_threads';
import type { PointsBlock, Task } from './contract.js';
import { createEvaluator } from './evaluate.js';

/* The worker thread: gets its task once, then chunks of points, and gives result blocks back without copying. */

interface Request {
  readonly id: string;
  readonly points: PointsBlock;
}

if (!parentPort) throw new Error('expected to be started as a worker thread, found no parent');
const port = parentPort;
const evaluator = createEvaluator((workerData as { task: Task }).task);

port.on('message', ({ id, points }: Request) => {
  try {
    const began = performance.now();
    const result = evaluator.evaluate(points);
    const milliseconds = performance.now() - began;
    port.postMessage({ id, result, milliseconds }, [
      result.quantities.buffer as ArrayBuffer,
      result.outcomes.buffer as ArrayBuffer,
      result.margins.buffer as ArrayBuffer,
      result.logLikelihoods.buffer as ArrayBuffer,
      result.failures.buffer as ArrayBuffer,
      result.verdicts.buffer as ArrayBuffer,
    ]);
  } catch (error) {
    port.postMessage({ id, error: error instanceof Error ? error.message : String(error) });
  }
});
