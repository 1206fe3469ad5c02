import { UserMistake } from '../mistakes.js';
import type { Reading } from '../store/reading.js';
import type { RunRecord } from '../store/records.js';

const SHORTEST_PREFIX = 6;

/** The run somebody means by an id, `latest`, or the beginning of a digest.
 *  Runs with one digest have the same results: of several, the first is meant.
 *  @throws UserMistake if there is none, or if the prefix fits different digests */
export function findRun(reading: Reading, word: string): RunRecord {
  const runs = [...reading.runs()].sort((a, b) => a.id - b.id);
  const found = byWord(runs, word);
  if (found) return found;
  throw new UserMistake({
    where: 'RUN',
    expected: `the id of a run, "latest" or the first ${SHORTEST_PREFIX} or more digits of a digest`,
    found: JSON.stringify(word),
    hint: whatThereIs(runs),
  });
}

function byWord(runs: readonly RunRecord[], word: string): RunRecord | undefined {
  if (word === 'latest') return runs.at(-1);
  const byId = /^\d{1,15}$/.test(word) ? runs.find((run) => run.id === Number(word)) : undefined;
  return byId ?? byDigest(runs, word.replace(/^sha256:/, '').toLowerCase());
}

function byDigest(runs: readonly RunRecord[], prefix: string): RunRecord | undefined {
  if (prefix.length < SHORTEST_PREFIX || !/^[0-9a-f]+$/.test(prefix)) return undefined;
  const fitting = runs.filter((run) => run.digest?.startsWith(`sha256:${prefix}`));
  const digests = new Set(fitting.map((run) => run.digest));
  if (digests.size > 1)
    throw new UserMistake({
      where: 'RUN',
      expected: 'the beginning of one digest',
      found: `${prefix}, which begins those of runs ${fitting.map((run) => run.id).join(', ')}`,
    });
  return fitting[0];
}

function whatThereIs(runs: readonly RunRecord[]): string {
  if (runs.length === 0) return 'the store has no run yet';
  const shown = runs.slice(-10).map((run) => run.id);
  return `there ${runs.length === 1 ? 'is run' : 'are runs'} ${shown.join(', ')}${runs.length > 10 ? ' and earlier ones' : ''}`;
}
