import { checkColumns } from '../batches.js';
import type { Position, Reading, SliceOfPoints, View } from '../reading.js';
import type { Batch } from '../records.js';
import { visit } from './visit.js';

/** The first `limit` points at or after a position that pass. Columns are read only where some point passes. */
export function sliceOf(
  reading: Reading,
  view: View,
  columns: readonly string[],
  from: Position,
  limit: number,
): SliceOfPoints {
  checkColumns(reading.columns(view.run), columns, `columns of run ${view.run}`);
  const parts: ReadonlyMap<string, Float64Array>[] = [];
  let count = 0;
  let next: Position | null = null;
  for (const batch of visit(reading, view, [], from)) {
    const chosen = passing(batch.passes, batch.count, limit - count);
    if (chosen.length > 0) parts.push(pick(batchAt(reading, view, columns, batch), chosen));
    count += chosen.length;
    if (count < limit) continue;
    next = { stratum: batch.stratum, index: batch.first + chosen[chosen.length - 1] + 1 };
    break;
  }
  return { count, columns: joined(columns, parts, count), next };
}

/** Places in the batch of the first points that pass. */
function passing(passes: Uint8Array, count: number, most: number): number[] {
  const chosen: number[] = [];
  for (let i = 0; i < count && chosen.length < most; i++) if (passes[i] === 1) chosen.push(i);
  return chosen;
}

/** The same batch again, with the columns that the filter did not need. */
function batchAt(reading: Reading, view: View, columns: readonly string[], at: Batch): Batch {
  const [batch] = reading.batches(view.run, columns, { stratum: at.stratum, index: at.first });
  return batch;
}

function pick(batch: Batch, chosen: readonly number[]): Map<string, Float64Array> {
  const picked = new Map<string, Float64Array>();
  for (const [name, values] of batch.columns) {
    const some = new Float64Array(chosen.length);
    for (let i = 0; i < chosen.length; i++) some[i] = values[chosen[i]];
    picked.set(name, some);
  }
  return picked;
}

function joined(
  names: readonly string[],
  parts: readonly ReadonlyMap<string, Float64Array>[],
  count: number,
): Map<string, Float64Array> {
  const columns = new Map(names.map((name) => [name, new Float64Array(count)]));
  let at = 0;
  for (const part of parts) {
    for (const [name, values] of part) columns.get(name)!.set(values, at);
    at += part.values().next().value?.length ?? 0;
  }
  return columns;
}
