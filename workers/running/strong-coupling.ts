import { log } from '../numerics/log.js';

/* QCD with five flavours, d a/d(ln mu^2) = -B0 a^2 (1 + b1 a + b2 a^2 + b3 a^3), a = alpha_s/pi, MSbar.
 * Source: van Ritbergen, Vermaseren and Larin, hep-ph/9701390 (four loops), from memory. */
const FLAVOURS = 5;
const ZETA3 = 1.2020569031595942;
export const B0 = (11 - (2 / 3) * FLAVOURS) / 4;
const b1 = (102 - (38 / 3) * FLAVOURS) / 16 / B0;
const b2 = (2857 / 2 - (5033 / 18) * FLAVOURS + (325 / 54) * FLAVOURS * FLAVOURS) / 64 / B0;
const b3 =
  (149753 / 6 +
    3564 * ZETA3 -
    (1078361 / 162 + (6508 / 27) * ZETA3) * FLAVOURS +
    (50065 / 162 + (6472 / 81) * ZETA3) * FLAVOURS * FLAVOURS +
    (1093 / 729) * FLAVOURS * FLAVOURS * FLAVOURS) /
  256 /
  B0;

/** alpha_s/pi at another scale, running with five flavours at four loops.
 *  @param a          alpha_s/pi where the running starts, > 0
 *  @param logSquared ln(mu^2/mu0^2) of the end mu over the start mu0
 *  @returns          NaN where Newton's method does not converge (near the Landau pole)
 *  Accuracy: the implicit solution is expanded to the order of the beta function, so that alpha_s(m_b) is good to
 *            3e-4 and alpha_s(M_t) to 1e-5 for alpha_s(M_Z) below 0.125 (light-yukawas.test.ts) */
export function runStrongCoupling(a: number, logSquared: number): number {
  const target = implicit(a) + B0 * logSquared;
  let x = a / (1 + a * B0 * logSquared);
  for (let i = 0; i < 20; i++) {
    const step = (implicit(x) - target) / slope(x);
    x -= step;
    if (!(x > 0 && x < 1)) return NaN;
    if (Math.abs(step) < 1e-13 * x) return x;
  }
  return NaN;
}

/** The integral of -da/(a^2 (1 + b1 a + ...)), expanded in a: it grows by B0 for a unit of ln mu^2. */
function implicit(a: number): number {
  return 1 / a + b1 * log(a) + a * (b2 - b1 * b1 + 0.5 * a * (b1 * b1 * b1 - 2 * b1 * b2 + b3));
}

function slope(a: number): number {
  return -1 / (a * a) + b1 / a + (b2 - b1 * b1) + a * (b1 * b1 * b1 - 2 * b1 * b2 + b3);
}
