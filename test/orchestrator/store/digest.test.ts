import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { openForWriting } from '../../../orchestrator/store/open.js';
import type { Writing } from '../../../orchestrator/store/writing.js';
import { exampleChunk, examplePlan, examplePoint, exampleRun, fillRun, newFile } from './example.js';

/** The recipe of the docstring of digest.ts, written again from its words alone and fed with what a worker said. */
function digestByTheBook(points: readonly number[]): string {
  const constraints = ['perturbativity', 'vacuum-stability', 'measured-top-mass'];
  const columns = ['Mh', 'Mt', 'lambdaMin', 'ratio', 'vacuumClass', 'failure'];
  for (const name of constraints) columns.push(`outcome(${name})`, `margin(${name})`, `likelihood(${name})`);
  columns.push('verdict');
  const sha = (parts: readonly Uint8Array[]) => createHash('sha256').update(Buffer.concat(parts)).digest();
  const columnHash = (stratum: number, first: number, count: number, name: string) => {
    const isByte = name === 'failure' || name === 'verdict' || name.startsWith('outcome');
    const bytes = Buffer.alloc(count * (isByte ? 1 : 8));
    for (let i = 0; i < count; i++) {
      const value = examplePoint(stratum, first + i).get(name)!;
      if (isByte) bytes.writeUInt8(value, i);
      else if (Number.isNaN(value)) bytes.writeBigUInt64LE(0x7ff8000000000000n, i * 8);
      else bytes.writeDoubleLE(value, i * 8);
    }
    return sha([bytes]);
  };
  const strata = points.map((total, stratum) => {
    const blocks: Buffer[] = [];
    for (let first = 0; first < total; first += 4096) {
      const count = Math.min(4096, total - first);
      blocks.push(sha(columns.map((name) => columnHash(stratum, first, count, name))));
    }
    return `{"hash":"${sha(blocks).toString('hex')}","points":${total}}`;
  });
  const names = columns.map((name) => `"${name}"`).join(',');
  const text = `{"columns":[${names}],"format":1,"strata":[${strata.join(',')}]}`;
  return `sha256:${createHash('sha256').update(text).digest('hex')}`;
}

function changed(store: Writing, change: (chunk: ReturnType<typeof exampleChunk>) => void): string {
  const plan = examplePlan([300, 5]);
  const run = store.createRun(exampleRun(plan));
  const chunk = exampleChunk({ stratum: 0, first: 0, count: 300 });
  change(chunk);
  store.commit(run, [chunk, exampleChunk({ stratum: 1, first: 0, count: 5 })]);
  return store.seal(run, 'complete', 1);
}

describe('the digest of a run', () => {
  it.each([[[5000, 700]], [[4096, 8192]], [[1, 4097]]])(
    'is what its description says, for %j points',
    (points) => {
      const store = openForWriting(newFile());
      expect(fillRun(store, examplePlan(points), 700).digest).toBe(digestByTheBook(points));
      store.close();
    },
  );

  it('changes with the last bit of any kind of column, and not with workers, times or NaN payloads', () => {
    const store = openForWriting(newFile());
    const base = changed(store, () => undefined);
    const flip = (array: Float64Array, at: number) => {
      new Uint8Array(array.buffer, array.byteOffset + at * 8, 1)[0] ^= 1;
    };
    const digests = [
      changed(store, (chunk) => flip(chunk.inputs, 299)),
      changed(store, (chunk) => flip(chunk.result.quantities, 300)),
      changed(store, (chunk) => flip(chunk.result.margins, 5)),
      changed(store, (chunk) => flip(chunk.result.logLikelihoods, 2 * 300)),
      changed(store, (chunk) => (chunk.result.outcomes[0] = 2)),
      changed(store, (chunk) => (chunk.result.failures[0] = 3)),
      changed(store, (chunk) => (chunk.result.verdicts[0] = 2)),
      changed(store, (chunk) => (chunk.result.quantities[0] = 0)), // it was -0
    ];
    expect(new Set([base, ...digests]).size).toBe(1 + digests.length);
    const payload = changed(store, (chunk) => {
      const absent = chunk.result.quantities.findIndex((value) => Number.isNaN(value));
      new BigUint64Array(chunk.result.quantities.buffer)[absent] = 0xfff8000000001234n;
    });
    const worker = changed(store, (chunk) => Object.assign(chunk, { worker: 'other', milliseconds: 99 }));
    expect([payload, worker]).toEqual([base, base]);
    store.close();
  });

  it('is refused while points are missing', () => {
    const store = openForWriting(newFile());
    const run = store.createRun(exampleRun());
    store.commit(run, [exampleChunk({ stratum: 0, first: 0, count: 10 })]);
    expect(() => store.seal(run, 'complete', 1)).toThrow(
      expect.objectContaining({
        code: 'not-complete',
        message: 'run 1 cannot be sealed: 10 of 5700 points are committed',
      }),
    );
    expect(store.run(run)).toMatchObject({ state: 'running', digest: null });
    store.close();
  });
});
