import type { PointsBlock, ResultBlock, Task } from '../../workers/contract.js';

/** The columns of a store that a result of a task fills, by name. */
export function resultColumns(task: Task, result: ResultBlock): Map<string, ArrayLike<number>> {
  const part = <T extends Float64Array | Uint8Array>(of: T, k: number) =>
    of.subarray(k * result.count, (k + 1) * result.count);
  return new Map<string, ArrayLike<number>>([
    ...task.keep.map((name, k) => [name, part(result.quantities, k)] as const),
    ...task.constraints.flatMap(({ name }, k) => [
      [`outcome(${name})`, part(result.outcomes, k)] as const,
      [`margin(${name})`, part(result.margins, k)] as const,
      [`likelihood(${name})`, part(result.logLikelihoods, k)] as const,
    ]),
    ['failure', result.failures],
    ['verdict', result.verdicts],
  ]);
}

export function resultColumnNames(task: Task): string[] {
  const ofConstraints = task.constraints.flatMap(({ name }) => [
    `outcome(${name})`,
    `margin(${name})`,
    `likelihood(${name})`,
  ]);
  return [...task.keep, ...ofConstraints, 'failure', 'verdict'];
}

export function inputColumns(task: Task, points: PointsBlock): Map<string, Float64Array> {
  const { count, values } = points;
  return new Map(task.varied.map((name, k) => [name, values.subarray(k * count, (k + 1) * count)]));
}
