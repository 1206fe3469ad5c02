import { VERDICTS } from '../../../workers/contract.js';
import type { FilteredCounts, Reading, View } from '../reading.js';
import { visit } from './visit.js';

/** How many points pass the filter, by verdict. */
export function countsOf(reading: Reading, view: View): FilteredCounts {
  const tally = new Uint32Array(VERDICTS.length);
  let total = 0;
  for (const batch of visit(reading, view, ['verdict'])) {
    const verdict = batch.columns.get('verdict')!;
    total += batch.count;
    const { count, passes } = batch;
    for (let i = 0; i < count; i++) tally[verdict[i] | 0] += passes[i];
  }
  const [surviving, excluded, failed, unfinished] = tally;
  const points = surviving + excluded + failed + unfinished;
  return { total, points, surviving, excluded, failed, unfinished };
}
