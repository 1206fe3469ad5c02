import type { Plan } from '../scan/plan.js';

/** Which columns the segments of a run hold, by kind and in canonical order. */
export interface Layout {
  /** Inputs that vary in some stratum, in the order they are dispatched in: sorted by name. */
  readonly inputs: readonly string[];
  /** Kept quantities and definitions, in the order of the plan. */
  readonly quantities: readonly string[];
  /** Names of the constraints, those that decide first, in the order of the plan. */
  readonly constraints: readonly string[];
  readonly deciding: number;
  /** Values of inputs that are not stored because the run does not vary them. */
  readonly fixed: Readonly<Record<string, number>>;
  /** Points of each stratum. */
  readonly strata: readonly number[];
}

export function layoutOf(plan: Plan): Layout {
  const varied = new Set(plan.strata.flatMap((stratum) => stratum.vary.map((axis) => axis.input)));
  return {
    inputs: [...varied].sort(),
    quantities: plan.keep,
    constraints: [...plan.require, ...plan.note].map((use) => use.name),
    deciding: plan.require.length,
    fixed: plan.fix,
    strata: plan.strata.map((stratum) => stratum.points),
  };
}

/** Points of a full segment, and of a block of the digest. */
export const BLOCK = 4096;

/** What varied inputs lead to, and what constraints say about it: child runs may share the one without the other. */
export const EVALUATION = 0;
export const JUDGEMENT = 1;
export type Kind = typeof EVALUATION | typeof JUDGEMENT;

export function columnsOf(layout: Layout, kind: Kind): string[] {
  return kind === EVALUATION ? evaluationColumns(layout) : judgementColumns(layout);
}

/** Columns of a byte a point; all others are float64. */
export function isByteColumn(name: string): boolean {
  return name === 'failure' || name === 'verdict' || name.startsWith('outcome(');
}

export function kindOf(name: string): Kind {
  return name === 'verdict' || /^(outcome|margin|likelihood)\(/.test(name) ? JUDGEMENT : EVALUATION;
}

function evaluationColumns(layout: Layout): string[] {
  return [...layout.inputs, ...layout.quantities, 'failure'];
}

function judgementColumns(layout: Layout): string[] {
  return [
    ...layout.constraints.flatMap((name) => [`outcome(${name})`, `margin(${name})`, `likelihood(${name})`]),
    'verdict',
  ];
}
