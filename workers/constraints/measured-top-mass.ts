import { topMass } from './data/measured.js';
import { gaussian } from './gaussian.js';

export const measuredTopMass = gaussian({
  name: 'measured-top-mass',
  code: import.meta.url,
  title: 'Measured mass of the top quark',
  needs: ['Mt', 'topMassShift'],
  unit: 'GeV',
  symbol: 'M_{t}',
  measurement: topMass,
  range: [100, 250],
  validity: 'any point; the measured mass is the pole mass Mt plus topMassShift',
  neglects: 'the theory error of what a direct measurement means, unless topMassShift is varied',
});
