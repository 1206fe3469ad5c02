import { UserMistake } from '../mistakes.js';
import { checkNames } from './named.js';
import { modelNamed } from './models.js';

export interface BetasFacts {
  readonly format: 1;
  readonly model: string;
  /** What was given; every other coupling is 0. */
  readonly at: Readonly<Record<string, number>>;
  /** d/dt with t = ln mu, loop factors included; total is their sum. */
  readonly couplings: Readonly<
    Record<string, { readonly one_loop: number; readonly two_loop: number; readonly total: number }>
  >;
}

/** Beta functions of every coupling of a model at a point in coupling space.
 *  @throws UserMistake for a model or coupling that does not exist, or a result that is no number */
export function betas(name: string, at: Readonly<Record<string, number>>): BetasFacts {
  const model = modelNamed(name);
  const known = model.couplings.map((coupling) => coupling.name);
  checkNames(Object.keys(at), known, '--at', `a coupling of ${name}`);
  try {
    return { format: 1, model: name, at, couplings: finite(model.betas(at)) };
  } catch (error) {
    // Couplings that contradict each other, e.g. gY and g1.
    if (!(error instanceof RangeError)) throw error;
    const [, expected, found] = /^expected (.*), found (.*)$/.exec(error.message) ?? [
      '',
      'couplings that agree',
      error.message,
    ];
    throw new UserMistake({ where: '--at', expected, found });
  }
}

function finite(couplings: BetasFacts['couplings']): BetasFacts['couplings'] {
  const lost = Object.keys(couplings).find((name) => !Number.isFinite(couplings[name].total));
  if (lost === undefined) return couplings;
  throw new UserMistake({
    where: '--at',
    expected: 'couplings whose beta functions are numbers',
    found: `values so large that d${lost}/dt is none`,
  });
}
