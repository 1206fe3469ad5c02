import { describe, expect, it } from 'vitest';
import { addTwoLoops, oneLoop } from '../../../workers/running/sm-beta-functions.js';
import { FIELD, STATE_SIZE } from '../../../workers/running/state.js';
import { goldenBetas } from '../../golden/betas/polynomials.js';

/* Oracle: test/golden/betas/sm.txt, exact rationals from a tensor evaluation of the general formulas of Machacek
 * and Vaughn, independent of the typed file. */

const NAMES = ['gY', 'g2', 'g3', 'yt', 'yb', 'ytau', 'lambda', 'm2'];
const golden = goldenBetas('sm');
const FACTOR = 16 * Math.PI ** 2;

/** Points spread over the signs and sizes that a scan may meet; a plain additive sequence, no randomness. */
function point(seed: number): Float64Array {
  const y = new Float64Array(STATE_SIZE);
  for (let i = 0; i < STATE_SIZE; i++) y[i] = 2 * (((seed + 1) * (i + 1) * 0.6180339887498949) % 1) - 0.7;
  return y;
}

function named(y: Float64Array): Record<string, number> {
  return Object.fromEntries(NAMES.map((name, i) => [name, y[i]]));
}

describe('the typed beta functions', () => {
  const points = Array.from({ length: 200 }, (_, i) => point(i));

  it.each(NAMES.map((name, i) => [name, i] as const))(
    'agree with the tensor evaluation for %s',
    (name, i) => {
      for (const y of points) {
        const one = new Float64Array(STATE_SIZE);
        const two = new Float64Array(STATE_SIZE);
        oneLoop(y, one);
        addTwoLoops(y, two);
        const first = golden.get(`b1[${name}]`)!(named(y)) / FACTOR;
        const second = golden.get(`b2[${name}]`)!(named(y)) / FACTOR ** 2;
        expect(Math.abs(one[i] - first)).toBeLessThan(1e-14 * (1 + Math.abs(first)));
        expect(Math.abs(two[i] - second)).toBeLessThan(1e-14 * (1 + Math.abs(second)));
      }
    },
  );

  /* Landau gauge: Machacek and Vaughn I, gamma = -g^2 3 C2(S) at one loop and
   * -g^4 C2(S) [(35/3) C2(G) - (10/3) kappa S2(F) - (11/12) S2(S)] + (3/2) g^2 g'^2 C2(S) C2'(S) at two loops
   * (xi = 0, kappa = 1/2); the Yukawa and quartic part is the wave function of the Higgs, which stands alone in
   * the beta function of a fermion that does not couple to the loop: quark terms in b[ytau], tau terms in b[yt]. */
  it('give the Higgs field the anomalous dimension of the general formula', () => {
    const S2F = { weak: 12 / 2, hyper: 3 * (6 / 36 + 12 / 9 + 3 / 9 + 2 / 4 + 1) };
    const [weak, hyper] = [3 / 4, 1 / 4];
    const pureWeak = -weak * ((35 / 3) * 2 - (5 / 3) * S2F.weak - 11 / 12) + 1.5 * weak * weak;
    const pureHyper = -hyper * (-(5 / 3) * S2F.hyper - 11 / 12) + 1.5 * hyper * hyper;
    for (const y of points) {
      const v = named(y);
      const quarks = (key: string, gauge: Record<string, number>): number => {
        const f = (values: Record<string, number>): number =>
          golden.get(key)!({ ...values, ytau: 1e-9 }) / 1e-9;
        return f({ ...v, ...gauge }) - f({ ...v, ...gauge, yt: 0, yb: 0, lambda: 0 });
      };
      const tau = (key: string): number => {
        const f = (values: Record<string, number>): number =>
          golden.get(key)!({ ...values, yt: 1e-9, yb: 0 }) / 1e-9;
        return f({ ...v, lambda: 0 }) - f({ ...v, lambda: 0, ytau: 0 });
      };
      const one = quarks('b1[ytau]', {}) + tau('b1[yt]') - 3 * (weak * v.g2 ** 2 + hyper * v.gY ** 2);
      const two =
        quarks('b2[ytau]', {}) +
        tau('b2[yt]') +
        pureWeak * v.g2 ** 4 +
        pureHyper * v.gY ** 4 +
        2 * 1.5 * weak * hyper * v.g2 ** 2 * v.gY ** 2;
      const out1 = new Float64Array(STATE_SIZE);
      const out2 = new Float64Array(STATE_SIZE);
      oneLoop(y, out1);
      addTwoLoops(y, out2);
      expect(out1[FIELD]).toBeCloseTo(-one / FACTOR, 12);
      expect(out2[FIELD]).toBeCloseTo(-two / FACTOR ** 2, 12);
    }
  });
});
