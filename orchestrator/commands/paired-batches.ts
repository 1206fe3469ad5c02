import type { Reading } from '../store/reading.js';
import type { Batch } from '../store/records.js';

/** Consecutive points of one stratum that two runs both have, with the asked columns of each. */
export interface Pair {
  readonly stratum: number;
  readonly first: number;
  readonly count: number;
  readonly columns: readonly [ReadonlyMap<string, Float64Array>, ReadonlyMap<string, Float64Array>];
}

/** Walks two runs side by side; points that only one of them has are passed over. */
export function* pairedBatches(
  reading: Reading,
  runs: readonly [number, number],
  columns: readonly string[],
): Generator<Pair> {
  const left = cursor(reading.batches(runs[0], columns));
  const right = cursor(reading.batches(runs[1], columns));
  for (let [a, b] = [left.now(), right.now()]; a && b; [a, b] = [left.now(), right.now()]) {
    const before = a.stratum - b.stratum || a.first - b.first;
    if (before === 0) {
      const count = Math.min(a.count, b.count);
      yield { stratum: a.stratum, first: a.first, count, columns: [head(a, count), head(b, count)] };
      left.drop(count);
      right.drop(count);
    } else if (before < 0) left.drop(gap(a, b));
    else right.drop(gap(b, a));
  }
}

/** Points of the earlier batch that come before the later one. */
function gap(earlier: Batch, later: Batch): number {
  return earlier.stratum < later.stratum
    ? earlier.count
    : Math.min(earlier.count, later.first - earlier.first);
}

function head(batch: Batch, count: number): ReadonlyMap<string, Float64Array> {
  return new Map([...batch.columns].map(([name, values]) => [name, values.subarray(0, count)]));
}

function cursor(batches: Iterable<Batch>) {
  const source = batches[Symbol.iterator]();
  let batch = source.next().value as Batch | undefined;
  return {
    now: () => batch,
    drop(count: number) {
      if (batch && count < batch.count) batch = rest(batch, count);
      else batch = source.next().value as Batch | undefined;
    },
  };
}

function rest(batch: Batch, count: number): Batch {
  const columns = new Map([...batch.columns].map(([name, values]) => [name, values.subarray(count)]));
  return { ...batch, first: batch.first + count, count: batch.count - count, columns };
}
