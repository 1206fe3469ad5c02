import type { Stratum } from '../scan/plan.js';

/** What an axis is to become: a range, with steps for a grid, or a list. Ranges and steps left out stay. */
export interface Wider {
  readonly range?: readonly [number, number];
  readonly steps?: number;
  readonly list?: readonly number[];
}

export type Widening = Readonly<Record<string, Wider>>;

/** Strata that belong together: one box, covered piece by piece. */
export type Family = readonly [Stratum, ...Stratum[]];
