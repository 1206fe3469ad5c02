import type { ResultBlock, Task } from '../../workers/contract.js';

/** What is wrong with the shape of a result, or undefined: a worker's word is not taken for it. */
export function wrongShape(task: Task, count: number, result: ResultBlock): string | undefined {
  if (result.count !== count) return `expected ${count} points, found ${result.count}`;
  for (const [name, length] of lengthsOf(task, count)) {
    const found = result[name]?.length;
    if (found !== length) return `expected ${length} ${name}, found ${found ?? 'none'}`;
  }
  return undefined;
}

type ColumnBlock = Exclude<keyof ResultBlock, 'count'>;

/** The parts of a result with their lengths, in the order in which they travel. */
export function lengthsOf(task: Task, count: number): readonly (readonly [ColumnBlock, number])[] {
  const judged = task.constraints.length * count;
  return [
    ['quantities', task.keep.length * count],
    ['margins', judged],
    ['logLikelihoods', judged],
    ['outcomes', judged],
    ['failures', count],
    ['verdicts', count],
  ];
}
