import { alphaStrong } from './data/measured.js';
import { gaussian } from './gaussian.js';

export const measuredAlphaS = gaussian({
  name: 'measured-alpha-s',
  code: import.meta.url,
  title: 'Measured strong coupling',
  needs: ['alphaS'],
  unit: '1',
  symbol: '\\alpha_{s}',
  measurement: alphaStrong,
  range: [0.08, 0.15],
  validity: 'any point without new coloured particles below the energies of the measurements',
  neglects: 'correlations with other measured inputs, above all with the top mass',
});
