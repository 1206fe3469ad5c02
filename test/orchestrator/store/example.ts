import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import type { ColumnRecord } from '../../../orchestrator/store/records.js';
import type { ChunkResult, NewRun, Span, Writing } from '../../../orchestrator/store/writing.js';

/** A made-up run for tests of the store: two strata, two varied inputs, three kept quantities, two constraints.
 *  Every value is a plain function of (stratum, index), so that a test can say what must come back. */

export function folder(): string {
  const path = mkdtempSync(join(tmpdir(), 'trigpoint-store-'));
  onTestFinished(() => rmSync(path, { recursive: true, force: true }));
  return path;
}

export function newFile(): string {
  return join(folder(), 'store.sqlite');
}

export function examplePlan(points: readonly number[] = [5000, 700]): Plan {
  return {
    format: 1,
    title: 'An example',
    model: { name: 'example', options: {} },
    seed: 'seed',
    strata: points.map((count, i) => ({
      name: `part ${i}`,
      method: 'uniform',
      generation: 0,
      points: count,
      vary:
        i === 0
          ? [{ input: 'Mt', kind: 'range', from: 165, to: 180, scale: 'linear' }]
          : [
              { input: 'Mh', kind: 'gaussian', mean: 125, sigma: 1 },
              { input: 'Mt', kind: 'range', from: 165, to: 180, scale: 'linear' },
            ],
    })),
    fix: { Mh: 125.25, alphaS: 0.118 },
    define: [{ name: 'ratio', expression: 'Mt / Mh' }],
    running: { loops: 3, tolerance: 1e-9 },
    require: [
      { name: 'perturbativity', options: {} },
      { name: 'vacuum-stability', options: { accept: 'stable' } },
    ],
    note: [{ name: 'measured-top-mass', options: {} }],
    keep: ['lambdaMin', 'ratio', 'vacuumClass'],
    remarks: [],
  };
}

export function exampleColumns(): ColumnRecord[] {
  const column = (name: string, kind: ColumnRecord['kind'], unit = '1'): ColumnRecord => {
    return { name, kind, unit, symbol: name, meaning: name };
  };
  return [
    column('Mt', 'input', 'GeV'),
    column('Mh', 'input', 'GeV'),
    column('alphaS', 'input'),
    { ...column('lambdaMin', 'quantity'), absent: 'not defined' },
    column('ratio', 'definition'),
    { ...column('vacuumClass', 'quantity'), labels: ['stable', 'metastable', 'unstable'] },
    ...['perturbativity', 'vacuum-stability', 'measured-top-mass'].flatMap((constraint) => [
      {
        ...column(`outcome(${constraint})`, 'outcome'),
        constraint,
        labels: ['met', 'violated', 'not-applicable'],
      },
      { ...column(`margin(${constraint})`, 'margin'), constraint },
      { ...column(`likelihood(${constraint})`, 'likelihood'), constraint },
    ]),
  ];
}

export function exampleRun(plan: Plan = examplePlan(), change: Partial<NewRun> = {}): NewRun {
  return {
    parent: null,
    relation: 'launch',
    plan,
    scanFile: { name: 'example.yaml', text: 'title: An example\n' },
    fingerprints: {
      plan: 'sha256:p',
      task: 'sha256:t',
      model: 'sha256:m',
      modules: { running: 'sha256:r' },
      constraints: {},
      sampling: 'sha256:s',
    },
    environment: {
      trigpoint: '0.1.0',
      commit: '',
      lockFile: '',
      node: '20',
      v8: '11',
      os: 'Linux',
      processor: 'one',
      cores: 2,
    },
    columns: exampleColumns(),
    wanted: plan.strata.reduce((sum, stratum) => sum + stratum.points, 0),
    ...change,
  };
}

/** All values of one point, by column name. Every 11th point failed; awkward numbers are sprinkled in. */
export function examplePoint(stratum: number, index: number): Map<string, number> {
  const failed = index % 11 === 7;
  const Mt = 165 + ((index * 37) % 1500) / 100;
  const Mh = stratum === 0 ? 125.25 : 124 + ((index * 13) % 200) / 100;
  const awkward = [-0, Infinity, -Infinity, 5e-324, NaN];
  const lambdaMin = index % 50 === 0 ? awkward[(index / 50) % 5] : 0.01 - ((index * 29) % 1000) / 20000;
  const outcomes = failed ? [2, 2, 2] : [index % 5 === 0 ? 1 : 0, lambdaMin < 0 ? 1 : 0, index % 3];
  const verdict = failed ? 2 : outcomes[0] === 1 || outcomes[1] === 1 ? 1 : 0;
  const names = ['perturbativity', 'vacuum-stability', 'measured-top-mass'];
  return new Map<string, number>([
    ['stratum', stratum],
    ['index', index],
    ['verdict', verdict],
    ['failure', failed ? 1 + (index % 4) : 0],
    ['Mt', Mt],
    ['Mh', Mh],
    ['alphaS', 0.118],
    ['lambdaMin', failed ? NaN : lambdaMin],
    ['ratio', Mt / Mh],
    ['vacuumClass', failed ? NaN : index % 3],
    ...names.flatMap((name, c): [string, number][] => [
      [`outcome(${name})`, outcomes[c]],
      [`margin(${name})`, failed ? NaN : (c + 1) * (index % 17) - 8],
      [`likelihood(${name})`, failed || c < 2 ? NaN : -(index % 23) / 2],
    ]),
  ]);
}

/** What a worker would send back for these points. */
export function exampleChunk(span: Span, worker = 'thread 1'): ChunkResult {
  const points = Array.from({ length: span.count }, (_, i) => examplePoint(span.stratum, span.first + i));
  const pick = (names: readonly string[]) => names.flatMap((name) => points.map((point) => point.get(name)!));
  const constraints = ['perturbativity', 'vacuum-stability', 'measured-top-mass'];
  const each = (form: string) => constraints.map((name) => `${form}(${name})`);
  return {
    ...span,
    inputs: Float64Array.from(pick(['Mh', 'Mt'])),
    result: {
      count: span.count,
      quantities: Float64Array.from(pick(['lambdaMin', 'ratio', 'vacuumClass'])),
      outcomes: Uint8Array.from(pick(each('outcome'))),
      margins: Float64Array.from(pick(each('margin'))),
      logLikelihoods: Float64Array.from(pick(each('likelihood'))),
      failures: Uint8Array.from(pick(['failure'])),
      verdicts: Uint8Array.from(pick(['verdict'])),
    },
    worker,
    milliseconds: 5,
  };
}

/** Chunks of `size` points that cover a plan, in order. */
export function chunksOf(plan: Plan, size: number): Span[] {
  return plan.strata.flatMap((stratum, s) =>
    Array.from({ length: Math.ceil(stratum.points / size) }, (_, i) => ({
      stratum: s,
      first: i * size,
      count: Math.min(size, stratum.points - i * size),
    })),
  );
}

/** A store with one finished run. Returns its digest. */
export function fillRun(store: Writing, plan = examplePlan(), size = 512): { run: number; digest: string } {
  const run = store.createRun(exampleRun(plan));
  for (const span of chunksOf(plan, size)) store.commit(run, [exampleChunk(span)]);
  return { run, digest: store.seal(run, 'complete', 1) };
}
