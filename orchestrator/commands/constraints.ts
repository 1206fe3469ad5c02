import type { Constraint } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { named } from './named.js';

/** What a constraint says of itself: all but its code. */
export type ConstraintFacts = Omit<Constraint, 'code' | 'judge' | 'explain'>;

export interface ConstraintsFacts {
  readonly format: 1;
  readonly constraints: readonly ConstraintFacts[];
}

/** All constraints of the catalogue, or the one with this name.
 *  @throws UserMistake with the nearest name */
export function describeConstraints(name?: string): ConstraintsFacts {
  const chosen = name === undefined ? [...constraints.values()] : [constraintNamed(name)];
  return { format: 1, constraints: chosen.map(factsOf) };
}

/** @throws UserMistake with the nearest name */
export function constraintNamed(name: string): Constraint {
  return named(constraints, name, 'NAME', 'a constraint');
}

function factsOf(constraint: Constraint): ConstraintFacts {
  const { name, title, needs, options, marginScale, formula, sources, validity, neglects } = constraint;
  return { name, title, needs, options, marginScale, formula, sources, validity, neglects };
}
