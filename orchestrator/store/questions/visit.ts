import { checkColumns } from '../batches.js';
import type { Position, Reading, View } from '../reading.js';
import type { Batch } from '../records.js';
import { filterOf } from './filter.js';

/** A batch with what the filter says about its points: 1 where a point passes. */
export interface Marked extends Batch {
  readonly passes: Uint8Array;
}

/** Goes through the committed points of a view in order. The marks are only good until the next batch.
 *  @throws UserMistake for a filter or a column that the run does not understand */
export function* visit(
  reading: Reading,
  view: View,
  columns: readonly string[],
  from?: Position,
): Iterable<Marked> {
  const known = reading.columns(view.run);
  checkColumns(known, columns, `columns of run ${view.run}`);
  const filter = filterOf(view.where, known);
  let passes = new Uint8Array(0);
  for (const batch of reading.batches(view.run, [...new Set([...columns, ...filter.names])], from)) {
    if (passes.length < batch.count) passes = new Uint8Array(batch.count);
    filter.mark(batch.columns, batch.count, passes);
    yield { ...batch, passes };
  }
}
