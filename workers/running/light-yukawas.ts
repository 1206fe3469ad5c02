import { exp } from '../numerics/exp.js';
import { log } from '../numerics/log.js';
import { B0, runStrongCoupling } from './strong-coupling.js';

/* The published interpolation for the top mass scale holds M_Z and G_F at their measured values; so do the two
 * light Yukawa couplings here, whose effect on everything else is far below its errors. */
const MZ = 91.1876;
/** (sqrt2 G_F)^(-1/2) in GeV with G_F = 1.1663788e-5 GeV^-2 (PDG 2024, from memory). */
const V = 1 / Math.sqrt(Math.SQRT2 * 1.1663788e-5);
/** alpha in MSbar at M_Z, PDG 2024. */
const ALPHA = 1 / 127.93;

/** y_b at mu = M_t: the MSbar mass run from m_b to M_t with five flavours at four loops of QCD.
 *  @param mb     m_b(m_b), GeV
 *  @param alphaS alpha_s(M_Z), five flavours
 *  @returns      sqrt2 m_b(M_t)/v, NaN where alpha_s(m_b) does not exist
 *  Neglects: electroweak threshold corrections (some per cent) and the sixth flavour's (2e-4)
 *  Source:   c(x) of Chetyrkin, hep-ph/9703278, and Vermaseren, Larin and van Ritbergen, hep-ph/9703284,
 *            five flavours, from memory */
export function bottomYukawa(mb: number, alphaS: number, Mt: number): number {
  const start = alphaS / Math.PI;
  const atBottom = runStrongCoupling(start, 2 * log(mb / MZ));
  const atTop = runStrongCoupling(start, 2 * log(Mt / MZ));
  return (Math.SQRT2 * mb * massFactor(atTop)) / massFactor(atBottom) / V;
}

/** m(mu) is proportional to c(alpha_s(mu)/pi): x^(12/23) (1 + 1.17549 x + ...). */
function massFactor(x: number): number {
  return exp(log(x) / B0) * (1 + x * (1.17549 + x * (1.50071 + x * 0.172478)));
}

/** y_tau at mu = M_t from the pole mass with the one-loop photon correction.
 *  @param mtau pole mass, GeV
 *  @returns    sqrt2 m_tau(M_t)/v
 *  Neglects: electroweak threshold corrections, of the order of one per cent
 *  Source:   pole and MSbar mass at one loop, Tarrach, Nucl. Phys. B183 (1981) 384, with C_F alpha_s -> alpha */
export function tauYukawa(mtau: number, Mt: number): number {
  return (Math.SQRT2 * mtau * (1 - (ALPHA / Math.PI) * (1 + 1.5 * log(Mt / mtau)))) / V;
}
