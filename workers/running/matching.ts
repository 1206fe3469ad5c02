import { column, outputs } from '../columns.js';
import type { Block, Module, QuantitySpec } from '../contract.js';
import { bottomYukawa, tauYukawa } from './light-yukawas.js';
import { interpolate } from './start-values.js';
import type { Interpolated } from './start-values.js';

/** sqrt(5/3): g1 = sqrt(5/3) gY, the normalisation of SU(5). */
export const G1_OVER_GY = Math.sqrt(5 / 3);

const NEEDS = ['Mt', 'Mh', 'alphaS', 'MW', 'mb', 'mtau', 'lambdaShift', 'ytShift'];
const ROUGH = 'simplified matching without electroweak thresholds';

const GIVES: readonly QuantitySpec[] = [
  atStart('gY', 'g_{Y}', 'hypercharge coupling'),
  atStart('g1', 'g_{1}', 'hypercharge coupling times sqrt(5/3)'),
  atStart('g2', 'g_{2}', 'weak coupling'),
  atStart('g3', 'g_{3}', 'strong coupling'),
  atStart('yt', 'y_{t}', 'top Yukawa coupling'),
  { ...atStart('yb', 'y_{b}', 'bottom Yukawa coupling'), caution: ROUGH },
  { ...atStart('ytau', 'y_{\\tau}', 'tau Yukawa coupling'), caution: ROUGH },
  atStart('lambda', '\\lambda', 'Higgs quartic coupling'),
  { ...atStart('m2', 'm^{2}', 'Higgs mass parameter of V = m2 |H|^2 + lambda |H|^4'), unit: 'GeV^2' },
  {
    name: 'matchingRange',
    unit: '1',
    symbol: '\\mathrm{matching}',
    meaning: 'whether the inputs lie where the published matching at M_t was made',
    labels: ['inside', 'outside'],
    caution: 'where outside, the couplings at M_t are extrapolated beyond their quoted errors',
  },
];

/** Couplings at mu = M_t from the inputs: published NNLO interpolation (arXiv:1307.3536), simpler for yb, ytau. */
export function matching(): Module {
  return { name: 'matching', code: import.meta.url, needs: NEEDS, gives: GIVES, evaluate };
}

function evaluate(block: Block): void {
  const [Mt, Mh, alphaS, MW, mb, mtau, lambdaShift, ytShift] = NEEDS.map((name) => column(block, name));
  const [gY, g1, g2, g3, yt, yb, ytau, lambda, m2, range] = outputs(block, GIVES);
  const at: Interpolated = { lambda: 0, yt: 0, g2: 0, gY: 0, g3: 0, m2: 0, valid: false };
  for (let i = 0; i < block.count; i++) {
    if (block.failure[i] !== 0) continue;
    interpolate(Mt[i], Mh[i], alphaS[i], MW[i], at);
    gY[i] = at.gY;
    g1[i] = G1_OVER_GY * at.gY;
    g2[i] = at.g2;
    g3[i] = at.g3;
    yt[i] = at.yt + ytShift[i];
    yb[i] = bottomYukawa(mb[i], alphaS[i], Mt[i]);
    ytau[i] = tauYukawa(mtau[i], Mt[i]);
    lambda[i] = at.lambda + lambdaShift[i];
    m2[i] = at.m2;
    range[i] = at.valid ? 0 : 1;
    if (!isFinite(yb[i])) block.failure[i] = 3;
  }
}

function atStart(name: string, symbol: string, meaning: string): QuantitySpec {
  return {
    name: `${name}AtStart`,
    unit: '1',
    symbol: `${symbol}(M_{t})`,
    meaning: `${meaning} at mu = M_t, MSbar`,
  };
}
