import { expect, it } from 'vitest';
import { proseHtml } from '../../dashboard/prose.js';

it.each([
  ['125.1751 against 125.2 +- 0.11 GeV: -0.23', '125.1751 against 125.2 ± 0.11 GeV: −0.23'],
  ['from h = 4.04e+4 GeV', 'from h = 4.04 × 10<sup>4</sup> GeV'],
  ['below 3e-12, decayed 10^-126', 'below 3 × 10<sup>−12</sup>, decayed 10<sup>−126</sup>'],
  ['g^2, y^2 and |lambda|', 'g<sup>2</sup>, y<sup>2</sup> and |lambda|'],
  ['<b>x</b> & top-mass', '&lt;b&gt;x&lt;/b&gt; &amp; top-mass'],
])('sets %s', (text, expected) => {
  expect(proseHtml(text).text).toBe(expected);
});
