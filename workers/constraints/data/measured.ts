import type { Source } from '../../contract.js';

/** A measured number with one standard deviation. */
export interface Measurement {
  readonly value: number;
  readonly sigma: number;
  readonly source: Source;
}

const PDG: Source = {
  text: 'Particle Data Group, Review of Particle Physics, 2024',
  ref: 'doi:10.1103/PhysRevD.110.030001',
};
const PDG_FROM_MEMORY: Source = { text: `${PDG.text} (from memory)`, ref: PDG.ref };

/** Masses in GeV; the direct top mass; M_W averaged without CDF 2022; alpha_s(M_Z) in MSbar with five flavours. */
export const topMass: Measurement = { value: 172.57, sigma: 0.29, source: PDG };
export const higgsMass: Measurement = { value: 125.2, sigma: 0.11, source: PDG };
export const alphaStrong: Measurement = { value: 0.118, sigma: 0.0009, source: PDG };
export const wMass: Measurement = { value: 80.3692, sigma: 0.0133, source: PDG };
export const zMass: Measurement = { value: 91.188, sigma: 0.002, source: PDG };
export const bottomMass: Measurement = { value: 4.183, sigma: 0.007, source: PDG_FROM_MEMORY };
export const tauMass: Measurement = { value: 1.77693, sigma: 0.00009, source: PDG };
export const fermiConstant: Measurement = { value: 1.1663788e-5, sigma: 6e-12, source: PDG_FROM_MEMORY };
