import { VERDICTS } from '../../workers/contract.js';
import { Broken } from '../mistakes.js';
import { canonicalJson } from '../provenance/canonical.js';
import type { Plan } from '../scan/plan.js';
import type { Connection } from './connect.js';
import { layoutOf } from './layout.js';
import type { Layout } from './layout.js';
import { pointColumns } from './point-columns.js';
import type { ColumnRecord, ConstraintRecord, Counts, RunRecord, RunState } from './records.js';
import type { NewRun } from './writing.js';

/** The table of runs. What describes a run never changes; state, counts and digest do. */
export interface Runs {
  all(): RunRecord[];
  get(id: number): RunRecord | undefined;
  columns(id: number): readonly ColumnRecord[];
  constraints(id: number): readonly ConstraintRecord[];
  layout(id: number): Layout;
  create(run: NewRun): number;
  /** Adds points by verdict (indices into VERDICTS) and returns the new counts. */
  count(id: number, verdicts: readonly Uint8Array[]): Counts;
  setState(id: number, state: RunState, seconds: number): void;
  setDigest(id: number, digest: string): void;
}

interface Row extends Counts {
  readonly id: number;
  readonly parent: number | null;
  readonly relation: string;
  readonly state: string;
  readonly title: string;
  readonly plan: string;
  readonly scan_name: string;
  readonly scan_text: string;
  readonly fingerprints: string;
  readonly environment: string;
  readonly wanted: number;
  readonly started: string;
  readonly finished: string | null;
  readonly seconds: number;
  readonly digest: string | null;
}

interface Description {
  readonly plan: Plan;
  readonly layout: Layout;
  readonly columns: readonly ColumnRecord[];
}

const FIELDS = `id, parent, relation, state, title, plan, scan_name, scan_text, fingerprints, environment,
  wanted, points, surviving, excluded, failed, unfinished, started, finished, seconds, digest`;

export function runsIn(db: Connection): Runs {
  const all = db.prepare<[], Row>(`SELECT ${FIELDS} FROM runs ORDER BY id`);
  const one = db.prepare<[number], Row>(`SELECT ${FIELDS} FROM runs WHERE id = ?`);
  const described = describer(db);
  return {
    all: () => all.all().map(recordOf),
    get(id) {
      const row = one.get(id);
      return row && recordOf(row);
    },
    columns: (id) => described(id).columns,
    constraints: (id) => constraintsOf(described(id).plan),
    layout: (id) => described(id).layout,
    ...changes(db),
  };
}

function changes(db: Connection): Pick<Runs, 'create' | 'count' | 'setState' | 'setDigest'> {
  const insert = db.prepare(`
    INSERT INTO runs (parent, relation, state, title, plan, scan_name, scan_text, fingerprints, environment,
                      columns, wanted, started)
    VALUES (@parent, @relation, 'running', @title, @plan, @name, @text, @fingerprints, @environment,
            @columns, @wanted, @started)`);
  const add = db.prepare<[number, number, number, number, number, number], Counts>(`
    UPDATE runs SET points = points + ?, surviving = surviving + ?, excluded = excluded + ?,
                    failed = failed + ?, unfinished = unfinished + ? WHERE id = ?
    RETURNING points, surviving, excluded, failed, unfinished`);
  const state = db.prepare('UPDATE runs SET state = ?, seconds = ?, finished = ? WHERE id = ?');
  const digest = db.prepare('UPDATE runs SET digest = ? WHERE id = ?');
  return {
    create: (run) => Number(insert.run(fieldsOf(run)).lastInsertRowid),
    count(id, verdicts) {
      const tally = tallyOf(verdicts);
      const points = tally.reduce((sum, n) => sum + n, 0);
      const counts = add.get(points, tally[0], tally[1], tally[2], tally[3], id);
      if (counts === undefined) throw noSuchRun(id);
      return counts;
    },
    setState(id, name, seconds) {
      const over = name === 'complete' || name === 'incomplete' || name === 'cancelled';
      const finished = over ? new Date().toISOString() : null;
      if (state.run(name, seconds, finished, id).changes === 0) throw noSuchRun(id);
    },
    setDigest: (id, value) => void digest.run(value, id),
  };
}

/** Plan, layout and columns of a run, kept for the runs asked for last. */
function describer(db: Connection): (id: number) => Description {
  const read = db.prepare<[number], { plan: string; columns: string }>(
    'SELECT plan, columns FROM runs WHERE id = ?',
  );
  const known = new Map<number, Description>();
  return (id) => {
    const cached = known.get(id);
    if (cached !== undefined) return cached;
    const row = read.get(id);
    if (row === undefined) throw noSuchRun(id);
    const plan = JSON.parse(row.plan) as Plan;
    const columns = JSON.parse(row.columns) as ColumnRecord[];
    const description = { plan, layout: layoutOf(plan), columns };
    if (known.size >= 64) known.clear();
    known.set(id, description);
    return description;
  };
}

function fieldsOf(run: NewRun): Record<string, string | number | null> {
  const own = run.columns.filter((column) => column.kind !== 'point');
  return {
    parent: run.parent,
    relation: run.relation,
    title: run.plan.title,
    plan: canonicalJson(run.plan),
    name: run.scanFile.name,
    text: run.scanFile.text,
    fingerprints: canonicalJson(run.fingerprints),
    environment: canonicalJson(run.environment),
    columns: canonicalJson([...pointColumns(), ...own]),
    wanted: run.wanted,
    started: new Date().toISOString(),
  };
}

function recordOf(row: Row): RunRecord {
  const { scan_name, scan_text, points, surviving, excluded, failed, unfinished, ...rest } = row;
  return {
    ...rest,
    relation: row.relation as RunRecord['relation'],
    state: row.state as RunState,
    scanFile: { name: scan_name, text: scan_text },
    fingerprints: JSON.parse(row.fingerprints) as RunRecord['fingerprints'],
    environment: JSON.parse(row.environment) as RunRecord['environment'],
    counts: { points, surviving, excluded, failed, unfinished },
  };
}

function constraintsOf(plan: Plan): ConstraintRecord[] {
  const record = (deciding: boolean) => (use: Plan['note'][number]) => ({ ...use, deciding });
  return [...plan.require.map(record(true)), ...plan.note.map(record(false))];
}

function tallyOf(verdicts: readonly Uint8Array[]): number[] {
  const tally = VERDICTS.map(() => 0);
  for (const part of verdicts) for (const verdict of part) tally[verdict]++;
  return tally;
}

function noSuchRun(id: number): Broken {
  return new Broken('no-such-run', `the store has no run ${id}`);
}
