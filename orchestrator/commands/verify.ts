import type { Task } from '../../workers/contract.js';
import { VERDICTS } from '../../workers/contract.js';
import type { OpenDispatcher } from '../dispatch/dispatcher.js';
import { NotHeld } from '../mistakes.js';
import { fingerprintsOf } from '../provenance/fingerprints.js';
import { samplerOf } from '../sampling/sampler.js';
import type { Plan } from '../scan/plan.js';
import { taskOf } from '../scan/task.js';
import type { Reading } from '../store/reading.js';
import type { Batch } from '../store/records.js';
import { differencesOfCode } from './differences.js';
import type { Difference } from './differences.js';
import { findRun } from './find-run.js';
import { planOf } from './new-run.js';
import { recompute } from './recompute.js';
import type { Portion } from './recompute.js';
import { inputColumns, resultColumnNames, resultColumns } from './result-columns.js';

export interface VerifyFacts {
  readonly format: 1;
  readonly run: number;
  readonly digest: string | null;
  /** Stored bytes that were read again and compared with the hashes taken when they were written. */
  readonly integrity: { readonly segments: number; readonly bytes: number };
  readonly points: number;
  readonly recomputed: number;
  /** Points that no worker could do when the run was made: there is nothing to compare. */
  readonly skipped: number;
  /** Points of which any input, quantity, outcome, margin, likelihood or verdict differs in any bit. */
  readonly differing: number;
  /** Column -> points in which it differs. */
  readonly columns: Readonly<Record<string, number>>;
  readonly examples: readonly { stratum: number; index: number; columns: readonly string[] }[];
  /** Code that is not what the run was made with. */
  readonly changed: readonly Difference[];
}

export interface VerifyRequest {
  /** Part of the points, evenly spread over them: 1 is all. */
  readonly part: number;
  readonly open: OpenDispatcher;
  readonly signal: AbortSignal;
  onProgress(done: number, all: number): void;
}

/** Points with what is stored of them: the columns hold one entry a point of `indices`. */
interface Stored {
  readonly stratum: number;
  readonly indices: readonly number[];
  readonly columns: ReadonlyMap<string, Float64Array>;
}

const EXAMPLES = 10;
/** Small enough that a worker is never long with one, and that several share the work. */
const POINTS_TOGETHER = 128;

/** Computes points of a run again from its plan, never from stored results, and compares them with what is stored
 *  bit by bit; reads every stored byte of the run too. Ends early, with what it has seen, when the signal says so. */
export async function verify(reading: Reading, word: string, request: VerifyRequest): Promise<VerifyFacts> {
  const run = findRun(reading, word);
  const plan = planOf(run);
  const task = taskOf(plan);
  const integrity = reading.verifyIntegrity(run.id);
  const account = newAccount();
  const stored = chosenPoints(reading, run.id, task, request.part, account);
  const all = Math.round(run.counts.points * request.part);
  for await (const { label, points, result } of recompute(task, portions(plan, stored), request.open)) {
    const found = new Map([...inputColumns(task, points), ...resultColumns(task, result)]);
    account.compare(label, found);
    request.onProgress(account.recomputed, all);
    if (request.signal.aborted) break;
  }
  const { recomputed, skipped, differing, columns, examples } = account;
  const changed = differencesOfCode(run.fingerprints, fingerprintsOf(plan, task));
  const counted = { points: run.counts.points, recomputed, skipped, differing, columns, examples };
  return { format: 1, run: run.id, digest: run.digest, integrity, ...counted, changed };
}

/** @throws NotHeld where any bit differs */
export function checkVerified(facts: VerifyFacts): void {
  if (facts.differing === 0) return;
  throw new NotHeld(
    'not-reproduced',
    `run ${facts.run}: ${facts.differing} of ${facts.recomputed} recomputed points differ from what is stored`,
  );
}

function newAccount() {
  return {
    recomputed: 0,
    skipped: 0,
    differing: 0,
    columns: {} as Record<string, number>,
    examples: [] as VerifyFacts['examples'][number][],
    compare(stored: Stored, found: ReadonlyMap<string, ArrayLike<number>>) {
      stored.indices.forEach((index, i) => {
        // Object.is: every NaN is the one absent value, but -0 is not 0.
        const names = [...found].filter(([name, now]) => !Object.is(stored.columns.get(name)?.[i], now[i]));
        this.recomputed += 1;
        if (names.length === 0) return;
        this.differing += 1;
        const columns = names.map(([name]) => name);
        for (const name of columns) this.columns[name] = (this.columns[name] ?? 0) + 1;
        if (this.examples.length < EXAMPLES) this.examples.push({ stratum: stored.stratum, index, columns });
      });
    },
  };
}

function* chosenPoints(
  reading: Reading,
  run: number,
  task: Task,
  part: number,
  account: { skipped: number },
): Generator<Stored> {
  const names = [...task.varied, ...resultColumnNames(task)];
  const unfinished = VERDICTS.indexOf('unfinished');
  let before = 0;
  for (const batch of reading.batches(run, names)) {
    const verdict = batch.columns.get('verdict')!;
    const rows: number[] = [];
    for (let row = 0; row < batch.count; row += 1, before += 1) {
      if (Math.floor((before + 1) * part) === Math.floor(before * part)) continue;
      if (verdict[row] === unfinished) account.skipped += 1;
      else rows.push(row);
    }
    for (let at = 0; at < rows.length; at += POINTS_TOGETHER)
      yield rowsOf(batch, rows.slice(at, at + POINTS_TOGETHER));
  }
}

function rowsOf(batch: Batch, rows: readonly number[]): Stored {
  const pick = (column: Float64Array) => Float64Array.from(rows, (row) => column[row]);
  return {
    stratum: batch.stratum,
    indices: rows.map((row) => batch.first + row),
    columns: new Map([...batch.columns].map(([name, column]) => [name, pick(column)])),
  };
}

/** The inputs as the plan gives them now. */
function* portions(plan: Plan, stored: Iterable<Stored>): Generator<Portion<Stored>> {
  const samplers = plan.strata.map((_, stratum) => samplerOf(plan, stratum));
  for (const label of stored) {
    const { stratum, indices } = label;
    const one = indices.map((index) => samplers[stratum].fill(index, 1).values);
    const count = indices.length;
    const values = new Float64Array(one[0].length * count);
    one.forEach((inputs, i) => inputs.forEach((input, k) => (values[k * count + i] = input)));
    yield { label, points: { count, values } };
  }
}
