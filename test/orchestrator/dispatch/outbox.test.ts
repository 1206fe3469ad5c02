import { expect, test } from 'vitest';
import { Outbox } from '../../../orchestrator/dispatch/outbox.js';
import type { ChunkResult } from '../../../orchestrator/store/writing.js';

const result = (first: number, count: number, stratum = 0): ChunkResult => ({
  stratum,
  first,
  count,
  inputs: new Float64Array(0),
  result: {
    count,
    quantities: new Float64Array(0),
    outcomes: new Uint8Array(0),
    margins: new Float64Array(0),
    logLikelihoods: new Float64Array(0),
    failures: new Uint8Array(0),
    verdicts: new Uint8Array(0),
  },
  worker: 'w',
  milliseconds: 1,
});
const firsts = (results: readonly ChunkResult[]) => results.map((r) => r.first);

test('a whole segment is ripe at once, a part of one only when it is old', () => {
  const outbox = new Outbox();
  outbox.put(result(0, 2048), 0);
  outbox.put(result(4096, 16), 0);
  expect(outbox.takeRipe(100)).toEqual([]);
  outbox.put(result(2048, 2048), 100);
  expect(firsts(outbox.takeRipe(100))).toEqual([0, 2048]);
  expect(outbox.points).toBe(16);
  expect(firsts(outbox.takeRipe(799))).toEqual([]);
  expect(firsts(outbox.takeRipe(800))).toEqual([4096]);
  expect(outbox.points).toBe(0);
});

test('the same indices of different strata are different segments', () => {
  const outbox = new Outbox();
  outbox.put(result(0, 2048, 0), 0);
  outbox.put(result(0, 2048, 1), 0);
  expect(outbox.takeRipe(0)).toEqual([]);
  expect(outbox.takeAll()).toHaveLength(2);
});

test('it never holds much: everything goes when many points wait', () => {
  const outbox = new Outbox();
  for (let i = 0; i < 32; i += 1) outbox.put(result(i * 4096, 2048), 0);
  expect(outbox.takeRipe(0)).toHaveLength(32);
  expect(outbox.points).toBe(0);
});
