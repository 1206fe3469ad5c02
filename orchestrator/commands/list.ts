import type { Reading } from '../store/reading.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';

export interface ListFacts {
  readonly format: 1;
  readonly runs: readonly RunAccount[];
}

/** Every run of a store, the oldest first. */
export function list(reading: Reading): ListFacts {
  const runs = [...reading.runs()].sort((a, b) => a.id - b.id);
  return { format: 1, runs: runs.map(accountOf) };
}
