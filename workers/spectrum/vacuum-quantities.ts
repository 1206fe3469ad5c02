import type { QuantitySpec } from '../contract.js';
import { VACUUM_CLASSES } from './vacuum-class.js';

const GAUGE = 'the scale depends on the gauge of the effective potential (Landau gauge here)';
const ESTIMATE = 'tree-level bounce without determinants or gravity: an estimate of the exponent';
const THEORY =
  'theory error of the matching: the border of absolute stability moves by about 0.3 GeV of M_h, 0.15 GeV of M_t';
const POSITIVE = 'the effective potential stays positive up to the cut-off';
const NO_BARRIER =
  'no barrier: the potential stays positive up to the cut-off, or is negative already at M_t';
const NO_DECAY = 'the vacuum does not decay below the cut-off';

/** What the module `vacuum` gives, in the order of its columns. Everything is asked between M_t and the cut-off, or
 *  the scale where perturbativity is lost if that is lower. */
export const vacuumQuantities: readonly QuantitySpec[] = [
  {
    name: 'lambdaMin',
    unit: '1',
    symbol: '\\lambda_{\\mathrm{min}}',
    meaning: 'lowest value of the running quartic up to the cut-off',
  },
  {
    name: 'lambdaMinScale',
    unit: 'GeV',
    symbol: '\\mu(\\lambda_{\\mathrm{min}})',
    meaning: 'scale at which the running quartic is lowest',
    logarithmic: true,
  },
  {
    name: 'lambdaZeroScale',
    unit: 'GeV',
    symbol: '\\mu(\\lambda=0)',
    meaning: 'lowest scale at which the running quartic is not positive',
    absent: 'lambda stays positive up to the cut-off',
    logarithmic: true,
  },
  {
    name: 'lambdaEffMin',
    unit: '1',
    symbol: '\\lambda_{\\mathrm{eff,min}}',
    meaning: 'lowest value of the effective quartic of the potential up to the cut-off',
    caution: THEORY,
  },
  {
    name: 'instabilityScale',
    unit: 'GeV',
    symbol: '\\Lambda_{I}',
    meaning: 'lowest field at which the effective potential is below the electroweak vacuum',
    absent: POSITIVE,
    caution: GAUGE,
    logarithmic: true,
  },
  {
    name: 'barrierHeight',
    unit: 'GeV',
    symbol: 'V_{\\mathrm{max}}^{1/4}',
    meaning: 'fourth root of the effective potential at the top of the barrier',
    absent: NO_BARRIER,
    logarithmic: true,
  },
  {
    name: 'barrierField',
    unit: 'GeV',
    symbol: 'h_{\\mathrm{max}}',
    meaning: 'Higgs field at the top of the barrier',
    absent: NO_BARRIER,
    caution: GAUGE,
    logarithmic: true,
  },
  {
    name: 'metastabilityMargin',
    unit: '1',
    symbol: '(\\lambda-\\lambda_{\\mathrm{crit}})_{\\mathrm{min}}',
    meaning: 'how far lambda stays above the value at which the vacuum would have decayed by today',
    caution: ESTIMATE,
  },
  {
    name: 'vacuumDecayExponent',
    unit: '1',
    symbol: '\\log_{10} p',
    meaning: 'common logarithm of the probability that the vacuum has decayed by today',
    absent: NO_DECAY,
    caution: ESTIMATE,
  },
  {
    name: 'vacuumDecayRate',
    unit: '1',
    symbol: '\\log_{10}(\\gamma \\mathrm{Gyr} \\mathrm{Gpc}^{3})',
    meaning: 'common logarithm of the decay rate per gigayear and cubic gigaparsec',
    absent: NO_DECAY,
    caution: ESTIMATE,
  },
  {
    name: 'vacuumClass',
    unit: '1',
    symbol: '\\mathrm{vacuum}',
    meaning:
      'fate of the electroweak vacuum; not perturbative where a coupling passes 4 pi before it is known',
    labels: VACUUM_CLASSES,
    caution: THEORY,
  },
];
