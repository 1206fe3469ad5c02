import { environmentRecord } from '../provenance/environment.js';
import { fingerprintsOf } from '../provenance/fingerprints.js';
import type { Plan } from '../scan/plan.js';
import { taskOf } from '../scan/task.js';
import type { Relation, RunRecord } from '../store/records.js';
import type { NewRun } from '../store/writing.js';
import { columnsOf } from './columns-of.js';

export interface Descent {
  readonly relation: Relation;
  readonly parent: RunRecord | null;
}

/** Everything a run records before its first point. */
export function newRun(plan: Plan, scanFile: NewRun['scanFile'], descent: Descent): NewRun {
  return {
    parent: descent.parent?.id ?? null,
    relation: descent.relation,
    plan,
    scanFile,
    fingerprints: fingerprintsOf(plan, taskOf(plan)),
    environment: environmentRecord(),
    columns: columnsOf(plan),
    wanted: plan.strata.reduce((sum, stratum) => sum + stratum.points, 0),
  };
}

/** The plan of a stored run. */
export function planOf(run: RunRecord): Plan {
  return JSON.parse(run.plan) as Plan;
}
