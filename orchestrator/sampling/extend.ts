import { UserMistake } from '../mistakes.js';
import type { Plan, Stratum } from '../scan/plan.js';
import { MOST_POINTS, MOST_STRATA } from '../scan/shape.js';
import { growPoints } from './grow.js';
import { widen } from './widen.js';
import type { Wider } from './widening.js';

export interface Change {
  /** More points: a number is the new total of the whole plan, a mapping gives new counts by name of stratum. */
  readonly points?: number | Readonly<Record<string, number>>;
  /** By input: a wider range, a finer grid or a longer list, in the units of the model. */
  readonly vary?: Readonly<Record<string, Wider>>;
}

export interface Extended {
  readonly plan: Plan;
  /** Points of the old plan: the same stratum and index in the new plan is the same point, bit for bit. */
  readonly reused: readonly { readonly stratum: number; readonly first: number; readonly count: number }[];
  /** Sentences for the user: what was done where that is not obvious. */
  readonly notes: readonly string[];
}

/** A plan that holds every point of another and more. No earlier point changes: a stratum gets a larger count, or
 *  strata are appended that cover only what is new.
 *
 *  - A new total N is spread over the strata that can grow (all but grids, whose points count towards N) in
 *    proportion to the points they have, largest remainders first, earlier strata first among equals.
 *  - uniform and sobol strata simply continue. A latin hypercube cannot grow: each of its cells holds its one point.
 *    Its new points come as another, independent hypercube over the same box, appended as a stratum; the union is
 *    no longer one hypercube, and a note says so (sobol is the sampler to choose where growth is wanted).
 *  - A wider range keeps the density of points per volume in the sampling measure (value, its logarithm, or entries
 *    of a list): the new volume is cut into disjoint boxes, each a stratum of at least one point.
 *  - A grid takes no number of points. A wider or finer grid must contain the old one; what is new is cut into
 *    disjoint grids.
 *  - Strata grown from one belong together (`grownFrom`) and are extended as one box.
 *
 *  @throws UserMistake where the new does not contain the old, nothing is new, or the plan gets too large */
export function extendPlan(plan: Plan, change: Change): Extended {
  const notes: string[] = [];
  let strata: readonly Stratum[] = plan.strata;
  if (change.vary) strata = widen({ ...plan, strata }, change.vary, notes);
  if (change.points !== undefined) strata = growPoints(strata, change.points, notes);
  requireNew(plan.strata, strata);
  const reused = plan.strata.map(({ points }, stratum) => ({ stratum, first: 0, count: points }));
  return { plan: { ...plan, strata }, reused, notes };
}

function requireNew(before: readonly Stratum[], after: readonly Stratum[]): void {
  const total = after.reduce((sum, { points }) => sum + points, 0);
  const where = 'extend';
  if (total === before.reduce((sum, { points }) => sum + points, 0)) {
    const hint = '--points or --vary says what to add';
    throw new UserMistake({ where, expected: 'more than the run has', found: 'nothing new', hint });
  }
  if (total > MOST_POINTS) {
    throw new UserMistake({ where, expected: `at most ${MOST_POINTS} points in all`, found: String(total) });
  }
  if (after.length > MOST_STRATA) {
    throw new UserMistake({ where, expected: `at most ${MOST_STRATA} strata`, found: String(after.length) });
  }
}
