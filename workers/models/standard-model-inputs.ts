import {
  alphaStrong,
  bottomMass,
  fermiConstant,
  higgsMass,
  tauMass,
  topMass,
  wMass,
  zMass,
} from '../constraints/data/measured.js';
import type { Measurement } from '../constraints/data/measured.js';
import type { InputSpec, Source } from '../contract.js';

type Words = readonly [name: string, unit: string, symbol: string, meaning: string];

const THEORY: Source = {
  text: 'Buttazzo et al., 2013, theory error of the matching',
  ref: 'arXiv:1307.3536',
};

/** Inputs of the Standard Model. `uncertainty` is one published standard deviation. */
export const standardModelInputs: readonly InputSpec[] = [
  measured(['Mt', 'GeV', 'M_{t}', 'pole mass of the top quark'], topMass, [50, 300]),
  measured(['Mh', 'GeV', 'M_{h}', 'pole mass of the Higgs boson'], higgsMass, [1, 1000]),
  measured(
    ['alphaS', '1', '\\alpha_{s}(M_{Z})', 'strong coupling at the Z mass, MSbar, five flavours'],
    alphaStrong,
    [0.08, 0.15],
  ),
  measured(['MW', 'GeV', 'M_{W}', 'pole mass of the W boson'], wMass, [79, 82]),
  measured(['MZ', 'GeV', 'M_{Z}', 'pole mass of the Z boson'], zMass, [90, 92.5]),
  measured(['mb', 'GeV', 'm_{b}(m_{b})', 'MSbar mass of the bottom quark at itself'], bottomMass, [3, 6]),
  measured(['mtau', 'GeV', 'M_{\\tau}', 'pole mass of the tau lepton'], tauMass, [1.5, 2]),
  measured(['GF', 'GeV^-2', 'G_{F}', 'Fermi constant'], fermiConstant, [1.1e-5, 1.2e-5]),
  {
    name: 'cutoff',
    unit: 'GeV',
    symbol: '\\Lambda',
    meaning: 'scale up to which the model is taken to hold',
    default: 1.2209e19,
    uncertainty: null,
    domain: [1e3, 1e20],
    nuisance: false,
    logarithmic: true,
    caution: 'gravity is neglected; at the Planck mass, 1.22e19 GeV, it is not small',
    source: {
      text: 'Planck mass, not reduced, from G = 6.67430e-11 m^3 kg^-1 s^-2 (CODATA 2022, from memory)',
      ref: 'https://physics.nist.gov/cuu/Constants/',
    },
  },
  nuisance(
    ['lambdaShift', '1', '\\delta\\lambda', 'shift of lambda at M_t by its theory error'],
    0.0003,
    [-0.1, 0.1],
    THEORY,
  ),
  nuisance(
    ['ytShift', '1', '\\delta y_{t}', 'shift of y_t at M_t by its theory error'],
    0.0005,
    [-0.1, 0.1],
    THEORY,
  ),
  nuisance(
    ['topMassShift', 'GeV', '\\delta M_{t}', 'measured minus pole mass of the top quark'],
    0.5,
    [-5, 5],
    { text: 'size common practice, no source', ref: '' },
  ),
];

function measured(words: Words, measurement: Measurement, domain: readonly [number, number]): InputSpec {
  const [name, unit, symbol, meaning] = words;
  const { value, sigma, source } = measurement;
  return { name, unit, symbol, meaning, default: value, uncertainty: sigma, domain, nuisance: false, source };
}

function nuisance(
  words: Words,
  uncertainty: number,
  domain: readonly [number, number],
  source: Source,
): InputSpec {
  const [name, unit, symbol, meaning] = words;
  return { name, unit, symbol, meaning, default: 0, uncertainty, domain, nuisance: true, source };
}
