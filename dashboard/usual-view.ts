import type { ColumnRecord, RunRecord } from '../orchestrator/store/records.js';
import type { CheckFacts } from '../orchestrator/commands/commands.js';
import { isClass } from './columns.js';
import { partsOf } from './parts.js';
import type { UsualView } from './view.js';

type Plan = CheckFacts['plan'];

/** What a run page shows before anything is chosen: the two inputs that are varied most widely against each other,
 *  coloured by the class with the most to tell apart, or by verdict. Of a plan in parts, those of the largest. */
export function usualView(run: RunRecord, columns: readonly ColumnRecord[]): UsualView {
  const varied = variedInputs(run, partsOf(run)[0].strata[0]).filter((name) =>
    columns.some((column) => column.name === name),
  );
  const spare = columns
    .filter((column) => column.kind === 'quantity' && !isClass(column))
    .map((one) => one.name);
  const [x, y] = [...varied, ...spare, 'index', 'stratum'];
  const named = columns
    .filter((column) => column.kind === 'quantity' && isClass(column))
    .sort((a, b) => (b.labels?.length ?? 0) - (a.labels?.length ?? 0));
  const margins = columns.filter((column) => column.kind === 'margin').slice(0, 3);
  return {
    x,
    y,
    colour: named[0]?.name ?? 'verdict',
    columns: ['verdict', ...varied, ...named.map((one) => one.name), ...margins.map((one) => one.name)],
  };
}

/** Inputs varied over a range before those with a measured spread, in order of name; of all strata or of one. */
export function variedInputs(run: RunRecord, stratum?: number): readonly string[] {
  const plan = JSON.parse(run.plan) as Plan;
  const strata = stratum === undefined ? plan.strata : plan.strata.slice(stratum, stratum + 1);
  const ranged = new Map<string, boolean>();
  for (const axis of strata.flatMap((one) => one.vary)) {
    ranged.set(axis.input, (ranged.get(axis.input) ?? false) || axis.kind === 'range');
  }
  const names = [...ranged.keys()].sort();
  return [...names.filter((name) => ranged.get(name)), ...names.filter((name) => !ranged.get(name))];
}

/** The range a plan gives an input, over all strata; null for what is no varied range. */
export function plannedRange(run: RunRecord, input: string): readonly [number, number] | null {
  const plan = JSON.parse(run.plan) as Plan;
  const ranges = plan.strata
    .flatMap((stratum) => stratum.vary)
    .flatMap((axis) => (axis.input === input && axis.kind === 'range' ? [axis] : []));
  if (ranges.length === 0) return null;
  return [Math.min(...ranges.map((axis) => axis.from)), Math.max(...ranges.map((axis) => axis.to))];
}
