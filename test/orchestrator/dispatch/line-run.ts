import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { openForWriting } from '../../../orchestrator/store/open.js';
import type { ColumnRecord, Environment } from '../../../orchestrator/store/records.js';
import type { NewRun, Writing } from '../../../orchestrator/store/writing.js';
import type { Options } from '../../../workers/contract.js';

/** Runs whose points are the whole numbers 0, 1, 2 ... and whose worker is programs/line-worker.mjs. */

export const LINE_WORKER = fileURLToPath(new URL('programs/line-worker.mjs', import.meta.url));

/** @param options at which x the worker misbehaves, and how long a point takes */
export function linePlan(points: readonly number[], options: Options = {}): Plan {
  return {
    format: 1,
    title: 'line',
    model: { name: 'line', options },
    seed: '1',
    strata: points.map((count, i) => ({
      name: `part-${i + 1}`,
      method: 'grid',
      generation: 0,
      points: count,
      vary: [{ input: 'x', kind: 'range', from: 0, to: count - 1, scale: 'linear', steps: count }],
    })),
    fix: {},
    define: [],
    running: { loops: 1, tolerance: 1e-6 },
    require: [{ name: 'even', options: {} }],
    note: [],
    keep: ['square', 'successor'],
    remarks: [],
  };
}

export function createLineRun(store: Writing, plan: Plan): number {
  return store.createRun(lineRun(plan));
}

export function lineRun(plan: Plan): NewRun {
  return {
    parent: null,
    relation: 'launch',
    plan,
    scanFile: { name: 'line.yaml', text: '' },
    fingerprints: { plan: 'p', task: 't', model: 'm', modules: {}, constraints: {}, sampling: 's' },
    environment: ENVIRONMENT,
    columns: columnsOf(plan),
    wanted: plan.strata.reduce((sum, part) => sum + part.points, 0),
  };
}

/** A store file in a temporary folder, removed by `remove`. */
export function temporaryStore(): { path: string; folder: string; open(): Writing; remove(): void } {
  const folder = mkdtempSync(join(tmpdir(), 'trigpoint-store-'));
  const path = join(folder, 'store.sqlite');
  return {
    path,
    folder,
    open: () => openForWriting(path),
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}

const ENVIRONMENT: Environment = {
  trigpoint: '0',
  commit: '',
  lockFile: '',
  node: '',
  v8: '',
  os: '',
  processor: '',
  cores: 1,
};
const plain = { unit: '1', symbol: '', meaning: '' };
function columnsOf({ keep }: Plan): ColumnRecord[] {
  return [
    { name: 'x', kind: 'input', ...plain },
    ...keep.map((name) => ({ name, kind: 'quantity' as const, ...plain })),
    { name: 'outcome(even)', kind: 'outcome', constraint: 'even', ...plain },
    { name: 'margin(even)', kind: 'margin', constraint: 'even', ...plain },
    { name: 'likelihood(even)', kind: 'likelihood', constraint: 'even', ...plain },
  ];
}
