import type { Plan } from '../scan/plan.js';
import { questionsOf } from '../store/questions.js';
import type { ChunkStatistics, CutFlow, Reading } from '../store/reading.js';
import type { Environment, Fingerprints } from '../store/records.js';
import { findRun } from './find-run.js';
import { planOf } from './new-run.js';
import { accountOf } from './run-facts.js';
import type { RunAccount } from './run-facts.js';

export interface ShowFacts extends RunAccount {
  readonly cutFlow: CutFlow;
  readonly unfinishedPoints: readonly { stratum: number; index: number; reason: string | null }[];
  readonly plan: Plan;
  readonly scanFile: { readonly name: string; readonly text: string };
  readonly fingerprints: Fingerprints;
  readonly environment: Environment;
  readonly chunks: ChunkStatistics;
}

/** Unfinished points that are named one by one. */
const NAMED = 20;

/** A run with its cut-flow and where it came from. */
export function show(reading: Reading, word: string): ShowFacts {
  const run = findRun(reading, word);
  const { scanFile, fingerprints, environment } = run;
  return {
    ...accountOf(run),
    cutFlow: questionsOf(reading).cutFlow({ run: run.id, where: '' }),
    unfinishedPoints: run.counts.unfinished > 0 ? unfinishedPoints(reading, run.id) : [],
    plan: planOf(run),
    scanFile,
    fingerprints,
    environment,
    chunks: reading.chunks(run.id),
  };
}

function unfinishedPoints(reading: Reading, run: number): ShowFacts['unfinishedPoints'] {
  const view = { run, where: 'unfinished' };
  const { rows } = questionsOf(reading).page(view, [], 0, NAMED);
  return rows.map(({ stratum, index }) => ({ stratum, index, reason: reading.reason(run, stratum, index) }));
}
