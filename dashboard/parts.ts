import type { CheckFacts } from '../orchestrator/commands/commands.js';
import type { RunRecord } from '../orchestrator/store/records.js';

/** Strata that vary the same inputs: one slice of parameter space, which a figure can show as a whole. */
export interface PlanPart {
  readonly strata: readonly number[];
  readonly names: readonly string[];
  readonly points: number;
}

/** The parts of a run's plan, the one with the most points first. */
export function partsOf(run: Pick<RunRecord, 'plan'>): readonly PlanPart[] {
  const { strata } = JSON.parse(run.plan) as CheckFacts['plan'];
  const parts = new Map<string, PlanPart>();
  strata.forEach(({ name, points, vary }, s) => {
    const slice = vary.map((axis) => axis.input).join(' ');
    const part = parts.get(slice) ?? { strata: [], names: [], points: 0 };
    parts.set(slice, {
      strata: [...part.strata, s],
      names: [...part.names, name],
      points: part.points + points,
    });
  });
  return [...parts.values()].sort((a, b) => b.points - a.points);
}

/** The condition that a point belongs to a part. */
export function inPart({ strata }: PlanPart): string {
  return strata.map((s) => `stratum == ${s}`).join(' or ');
}
