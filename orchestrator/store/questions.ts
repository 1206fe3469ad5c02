import { countsOf } from './questions/counts.js';
import { cutFlowOf } from './questions/cut-flow.js';
import { densityOf } from './questions/density.js';
import { pageOf } from './questions/page.js';
import { pointOf } from './questions/point.js';
import { scatterOf } from './questions/scatter.js';
import { sliceOf } from './questions/slice.js';
import type { Questions, Reading } from './reading.js';

/** Answers to the heavy questions; each sees one state of the store.
 *  @throws UserMistake for a filter or a column that the run does not understand */
export function questionsOf(reading: Reading): Questions {
  const ask =
    <A extends unknown[], R>(answer: (reading: Reading, ...args: A) => R) =>
    (...args: A): R =>
      reading.snapshot(() => answer(reading, ...args));
  return {
    counts: ask(countsOf),
    page: ask(pageOf),
    density: ask(densityOf),
    scatter: ask(scatterOf),
    cutFlow: ask(cutFlowOf),
    slice: ask(sliceOf),
    point: ask(pointOf),
  };
}
