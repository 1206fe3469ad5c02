import type { ResultBlock, Task } from '../../workers/contract.js';

export type Part = Exclude<keyof ResultBlock, 'count'>;

/** The arrays of a result in the order in which they travel: eight bytes an entry first, then one. */
export const PARTS: readonly Part[] = [
  'quantities',
  'margins',
  'logLikelihoods',
  'outcomes',
  'failures',
  'verdicts',
];

export function lengthOf(part: Part, task: Task, count: number): number {
  if (part === 'quantities') return task.keep.length * count;
  if (part === 'failures' || part === 'verdicts') return count;
  return task.constraints.length * count;
}

/** What is wrong with the shape of a result, or undefined: a worker's word is not taken for it. */
export function wrongShape(task: Task, count: number, result: ResultBlock): string | undefined {
  if (result.count !== count) return `expected ${count} points, found ${result.count}`;
  for (const part of PARTS) {
    const expected = lengthOf(part, task, count);
    const found = result[part]?.length;
    if (found !== expected) return `expected ${expected} ${part}, found ${found ?? 'none'}`;
  }
  return undefined;
}
