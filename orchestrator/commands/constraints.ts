import type { Constraint, OptionSpec, Source } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { named } from './named.js';

export interface ConstraintFacts {
  readonly name: string;
  readonly title: string;
  readonly needs: readonly string[];
  readonly options: Readonly<Record<string, OptionSpec>>;
  readonly marginScale: string;
  readonly formula: string;
  readonly sources: readonly Source[];
  readonly validity: string;
  readonly neglects: string;
}

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
