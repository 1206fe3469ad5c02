/** The state vector of the Standard Model's running: what stands where in the integrator's array.
 *  Couplings are dimensionless; MASS is m2(mu) / m2(start), FIELD is Gamma(mu), the logarithm of the Higgs
 *  field's rescaling since the start, d(ln h)/d(ln mu) in Landau gauge. */
export const GY = 0;
export const G2 = 1;
export const G3 = 2;
export const YT = 3;
export const YB = 4;
export const YTAU = 5;
export const LAMBDA = 6;
export const MASS = 7;
export const FIELD = 8;
export const STATE_SIZE = 9;

/** The loop factor 1/(16 pi^2). */
export const LOOP = 1 / (16 * Math.PI * Math.PI);
