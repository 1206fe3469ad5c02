import { higgsMass } from './data/measured.js';
import { gaussian } from './gaussian.js';

export const measuredHiggsMass = gaussian({
  name: 'measured-higgs-mass',
  code: import.meta.url,
  title: 'Measured mass of the Higgs boson',
  needs: ['Mh'],
  unit: 'GeV',
  symbol: 'M_{h}',
  measurement: higgsMass,
  range: [50, 500],
  validity: 'any point whose Higgs boson is the one observed',
  neglects: 'correlations with other measured inputs',
});
