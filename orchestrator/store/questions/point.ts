import type { Reading } from '../reading.js';

/** Every column of one point, or undefined if it is not committed. */
export function pointOf(
  reading: Reading,
  run: number,
  stratum: number,
  index: number,
): ReadonlyMap<string, number> | undefined {
  const names = reading.columns(run).map((column) => column.name);
  const [batch] = reading.batches(run, names, { stratum, index });
  if (batch?.stratum !== stratum || batch.first !== index) return undefined;
  return new Map(names.map((name) => [name, batch.columns.get(name)![0]]));
}
