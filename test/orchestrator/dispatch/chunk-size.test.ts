import { expect, test } from 'vitest';
import { ChunkSize } from '../../../orchestrator/dispatch/chunk-size.js';

test.each([
  // milliseconds a point, points left, capacity, size
  [0.001, 1e7, 4, 4096],
  [0.5, 1e7, 4, 512],
  [2, 1e7, 4, 128],
  [500, 1e7, 4, 16],
  // The last points are shared out.
  [0.001, 4096, 4, 1024],
  [0.001, 100, 4, 16],
  [0.001, 1, 4, 16],
])(
  'at %f ms a point, %i points left and %i in flight, a chunk has %i points',
  (cost, left, capacity, size) => {
    const chunks = new ChunkSize();
    chunks.learn(100, 100 * cost);
    expect(chunks.next(left, capacity)).toBe(size);
  },
);

test('the first chunks are small: nothing is known yet', () => {
  expect(new ChunkSize().next(1e7, 4)).toBe(64);
});

test('the size follows the cost of a point', () => {
  const chunks = new ChunkSize();
  chunks.learn(64, 64 * 0.01);
  for (let i = 0; i < 20; i += 1) chunks.learn(64, 64 * 1);
  expect(chunks.next(1e7, 4)).toBe(256);
});
