import { VERDICTS } from '../../workers/contract.js';
import type { Reading } from '../store/reading.js';
import type { RunRecord } from '../store/records.js';
import { differencesOfCode, differencesOfEnvironments, differencesOfPlans } from './differences.js';
import type { Difference } from './differences.js';
import { findRun } from './find-run.js';
import { planOf } from './new-run.js';
import { pairedBatches } from './paired-batches.js';
import type { Pair } from './paired-batches.js';

export interface CompareFacts {
  readonly format: 1;
  readonly runs: readonly [number, number];
  readonly digests: readonly [string | null, string | null];
  readonly sameDigest: boolean;
  /** Points are the same where stratum, index and every varied input agree bit by bit. */
  readonly points: {
    readonly same: number;
    readonly otherInputs: number;
    readonly onlyFirst: number;
    readonly onlySecond: number;
  };
  /** Of the same points: "surviving to excluded" -> how many. */
  readonly verdicts: Readonly<Record<string, number>>;
  /** Of the same points: those with any value that differs in any bit. */
  readonly changed: number;
  /** Columns both runs have, with the points in which they differ and the largest |second - first|: null for classes. */
  readonly columns: readonly {
    readonly name: string;
    readonly points: number;
    readonly largest: number | null;
  }[];
  readonly onlyIn: { readonly first: readonly string[]; readonly second: readonly string[] };
  /** Some of the points that changed, those with another verdict first. */
  readonly examples: readonly {
    readonly stratum: number;
    readonly index: number;
    readonly verdicts: readonly [string, string];
    readonly columns: readonly string[];
  }[];
  /** What is not the same in where the runs came from. */
  readonly explained: readonly Difference[];
}

const EXAMPLES = 10;

/** Points whose verdict or values changed between two runs, and what in their provenance explains it. */
export function compare(reading: Reading, firstWord: string, secondWord: string): CompareFacts {
  const runs = [findRun(reading, firstWord), findRun(reading, secondWord)] as const;
  const names = sharedColumns(reading, runs);
  const account = newAccount(names.values, names.classes);
  for (const pair of pairedBatches(reading, [runs[0].id, runs[1].id], [...names.inputs, ...names.values]))
    account.add(pair, names.inputs);
  return {
    format: 1,
    runs: [runs[0].id, runs[1].id],
    digests: [runs[0].digest, runs[1].digest],
    sameDigest: runs[0].digest !== null && runs[0].digest === runs[1].digest,
    ...account.facts(runs),
    onlyIn: names.onlyIn,
    explained: explain(runs),
  };
}

function explain([first, second]: readonly [RunRecord, RunRecord]): Difference[] {
  return [
    ...differencesOfPlans(planOf(first), planOf(second)),
    ...differencesOfCode(first.fingerprints, second.fingerprints),
    ...differencesOfEnvironments(first.environment, second.environment),
  ];
}

function sharedColumns(reading: Reading, runs: readonly [RunRecord, RunRecord]) {
  const [first, second] = runs.map(({ id }) =>
    reading.columns(id).filter(({ name }) => name !== 'stratum' && name !== 'index'),
  );
  const has = (columns: typeof first, name: string) => columns.some((column) => column.name === name);
  const shared = first.filter((column) => has(second, column.name));
  const names = (columns: typeof first) => columns.map((column) => column.name);
  return {
    inputs: names(shared.filter((column) => column.kind === 'input')),
    values: names(shared.filter((column) => column.kind !== 'input')),
    classes: new Set(names(shared.filter((column) => column.labels !== undefined))),
    onlyIn: {
      first: names(first.filter((column) => !has(second, column.name))),
      second: names(second.filter((column) => !has(first, column.name))),
    },
  };
}

function newAccount(values: readonly string[], classes: ReadonlySet<string>) {
  const total = { same: 0, otherInputs: 0, changed: 0 };
  const verdicts: Record<string, number> = {};
  const columns = new Map(values.map((name) => [name, { points: 0, largest: null as number | null }]));
  const judgedOtherwise: CompareFacts['examples'][number][] = [];
  const judgedTheSame: CompareFacts['examples'][number][] = [];
  const note = (pair: Pair, row: number, names: readonly string[]) => {
    const [from, to] = pair.columns.map((side) => VERDICTS[side.get('verdict')![row]]);
    if (from !== to) verdicts[`${from} to ${to}`] = (verdicts[`${from} to ${to}`] ?? 0) + 1;
    for (const name of names) {
      const entry = columns.get(name)!;
      entry.points += 1;
      if (!classes.has(name)) entry.largest = larger(entry.largest, distance(pair, name, row));
    }
    total.changed += 1;
    const { stratum, first } = pair;
    const examples = from === to ? judgedTheSame : judgedOtherwise;
    if (examples.length < EXAMPLES)
      examples.push({ stratum, index: first + row, verdicts: [from, to], columns: names });
  };
  return {
    add(pair: Pair, inputs: readonly string[]) {
      for (let row = 0; row < pair.count; row += 1) {
        if (differing(pair, inputs, row).length > 0) {
          total.otherInputs += 1;
          continue;
        }
        total.same += 1;
        const names = differing(pair, values, row);
        if (names.length > 0) note(pair, row, names);
      }
    },
    facts([first, second]: readonly [RunRecord, RunRecord]) {
      const { same, otherInputs, changed } = total;
      const onlyFirst = first.counts.points - same - otherInputs;
      const onlySecond = second.counts.points - same - otherInputs;
      const changedColumns = [...columns].map(([name, entry]) => ({ name, ...entry }));
      return {
        points: { same, otherInputs, onlyFirst, onlySecond },
        verdicts,
        changed,
        columns: changedColumns.filter((column) => column.points > 0),
        examples: [...judgedOtherwise, ...judgedTheSame].slice(0, EXAMPLES),
      };
    },
  };
}

function differing(pair: Pair, names: readonly string[], row: number): string[] {
  const [first, second] = pair.columns;
  return names.filter((name) => !Object.is(first.get(name)![row], second.get(name)![row]));
}

function distance(pair: Pair, name: string, row: number): number {
  const [first, second] = pair.columns;
  return Math.abs(second.get(name)![row] - first.get(name)![row]);
}

function larger(known: number | null, now: number): number | null {
  if (!Number.isFinite(now)) return known;
  return known === null || now > known ? now : known;
}
