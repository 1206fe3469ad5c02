import type { Constraint } from '../contract.js';
import { measuredAlphaS } from './measured-alpha-s.js';
import { measuredHiggsMass } from './measured-higgs-mass.js';
import { measuredTopMass } from './measured-top-mass.js';
import { perturbativity } from './perturbativity.js';
import { vacuumStability } from './vacuum-stability.js';

/** Every shipped constraint by name. */
export const constraints: ReadonlyMap<string, Constraint> = new Map(
  [perturbativity, vacuumStability, measuredTopMass, measuredHiggsMass, measuredAlphaS].map((constraint) => [
    constraint.name,
    constraint,
  ]),
);
