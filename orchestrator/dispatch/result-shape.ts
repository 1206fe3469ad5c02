import type { ResultBlock, Task } from '../../workers/contract.js';
import { FAILURES, OUTCOMES, VERDICTS } from '../../workers/contract.js';

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
  return wrongCode(result);
}

/** A code that stands for nothing would be counted and stored as if it did. */
function wrongCode(result: ResultBlock): string | undefined {
  for (const [part, words] of CODES) {
    const stranger = result[part].find((code) => !(code < words));
    if (stranger !== undefined) return `expected ${part} below ${words}, found ${stranger}`;
  }
  return undefined;
}

/** A worker never says unfinished, the last verdict. */
const CODES = [
  ['outcomes', OUTCOMES.length],
  ['failures', FAILURES.length],
  ['verdicts', VERDICTS.length - 1],
] as const;
