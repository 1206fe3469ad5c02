import { log } from '../numerics/log.js';
import { LAMBDA } from '../running/state.js';
import type { Observed } from './curve.js';

/* Decay of the electroweak vacuum by the bounce of a constant negative quartic at scale mu = 1/R:
 * action S = 8 pi^2 / (3 |lambda(mu)|), probability p = max over mu of 0.15 (mu/H0)^4 exp(-S), rate per volume
 * mu^4 exp(-S). Tree-level action, no functional determinants, no gravity.
 * Sources: Coleman, Phys. Rev. D15 (1977) 2929; Isidori, Ridolfi and Strumia, hep-ph/0104016; the factor 0.15 and
 * the form of p from Buttazzo et al., arXiv:1307.3536, from memory. */

/** Eight pi squared over three: S |lambda|. */
export const ACTION = (8 * Math.PI * Math.PI) / 3;
const PREFACTOR = log(0.15);
/** H0 = 67.4 km/s/Mpc (Planck 2018, arXiv:1807.06209) times hbar, in GeV; megaparsec and hbar of CODATA and IAU. */
const H0 = (67.4 / 3.0856775814913673e19) * 6.582119569e-25;
const LOG_H0 = log(H0);

/** ln p at scale t = ln(mu/GeV) with lambda < 0. */
export function logProbability(t: number, lambda: number): number {
  return PREFACTOR + 4 * (t - LOG_H0) + ACTION / lambda;
}

/** ln of the rate per volume, mu^4 exp(-S), in GeV^4. */
export function logRate(t: number, lambda: number): number {
  return 4 * t + ACTION / lambda;
}

/** ln of one gigayear (Julian) times a cubic gigaparsec in GeV^-4; hbar and hbar c of CODATA 2018. */
export const LOG_GYR_GPC3 =
  log(3.15576e16 / 6.582119569e-25) + 3 * log(3.0856775814913673e25 / 1.973269804e-16);

/** lambda - lambda_critical, where p(mu) = 1 at lambda_critical = -(8 pi^2/3)/ln(0.15 (mu/H0)^4): how far the quartic
 *  is from letting the vacuum decay within the age of the universe, positive where it lives longer. */
export class MetastabilityMargin implements Observed {
  value = 0;
  slope = 0;

  observe(t: number, y: Float64Array, dy: Float64Array): void {
    const age = PREFACTOR + 4 * (t - LOG_H0);
    this.value = y[LAMBDA] + ACTION / age;
    this.slope = dy[LAMBDA] - (4 * ACTION) / (age * age);
  }
}

/** S - 4 t, that is -ln p without its constants, where lambda < 0; huge elsewhere, for nothing decays there. */
export class Lifetime implements Observed {
  value = 0;
  slope = 0;

  observe(t: number, y: Float64Array, dy: Float64Array): void {
    const lambda = y[LAMBDA];
    const decays = lambda < 0;
    this.value = decays ? -logRate(t, lambda) : Number.MAX_VALUE;
    // The derivative times lambda^2/ACTION: no pole where lambda vanishes.
    this.slope = decays ? dy[LAMBDA] - (4 * lambda * lambda) / ACTION : dy[LAMBDA];
  }
}
