import { expect, it } from 'vitest';
import { addThreeLoops } from '../../../workers/running/sm-three-loops.js';
import { G2, G3, GY, LAMBDA, MASS, STATE_SIZE, YT } from '../../../workers/running/state.js';
import { goldenThreeLoops } from '../../golden/betas/three-loops.js';

/* Oracle: test/golden/betas/sm-three-loops.txt, the terms in squared couplings as the source prints them. The engine
 * has them factored, in plain couplings and against ln mu; that physics confirms them is shown in test/published/. */

const golden = goldenThreeLoops();
const CUBE = (16 * Math.PI ** 2) ** -3;

it('adds the published terms, turned from ln mu^2 and squared couplings to ln mu and plain ones', () => {
  expect([...golden.keys()].sort()).toEqual(['a', 'b', 'c', 'l', 'y']);
  for (let seed = 1; seed <= 100; seed++) {
    const y = new Float64Array(STATE_SIZE);
    for (let i = 0; i < STATE_SIZE; i++) y[i] = 2 * ((seed * (i + 1) * 0.6180339887498949) % 1) - 0.7;
    const squares = { a: (5 / 3) * y[GY] ** 2, b: y[G2] ** 2, c: y[G3] ** 2, y: y[YT] ** 2, l: y[LAMBDA] };
    const published = (name: string): number => CUBE * golden.get(name)!(squares);
    const expected = new Float64Array(STATE_SIZE);
    // d(X^2)/d(ln mu^2) = X dX/d(ln mu)
    expected[GY] = ((3 / 5) * published('a')) / y[GY];
    expected[G2] = published('b') / y[G2];
    expected[G3] = published('c') / y[G3];
    expected[YT] = published('y') / y[YT];
    expected[LAMBDA] = 2 * published('l');
    const out = new Float64Array(STATE_SIZE);
    addThreeLoops(y, out);
    for (let i = 0; i < STATE_SIZE; i++) {
      expect(Math.abs(out[i] - expected[i])).toBeLessThan(1e-15 + 1e-11 * Math.abs(expected[i]));
    }
    expect(out[MASS]).toBe(0);
  }
});

/* Oracle: the closed forms of Chetyrkin and Zoller, arXiv:1205.2892 (V = lambda |H|^4, against ln mu^2), from memory.
 * Two memories that agree to the last printed digit: the decimals of the engine and these. */
it('has the closed forms of the quartic, the top Yukawa coupling and one power of g3^2', () => {
  const zeta3 = 1.2020569031595942;
  const gaugeless = [
    -1599 / 8 - 36 * zeta3,
    117 / 8 - 198 * zeta3,
    1719 / 2 + 756 * zeta3,
    873,
    3588 + 2016 * zeta3,
  ];
  const strong = [-38 + 240 * zeta3, 895 - 1296 * zeta3, -1224 + 1152 * zeta3];
  const found = (l: number, y: number, c: number): number => {
    const state = new Float64Array(STATE_SIZE);
    [state[LAMBDA], state[YT], state[G3]] = [l, Math.sqrt(y), Math.sqrt(c)];
    const out = new Float64Array(STATE_SIZE);
    addThreeLoops(state, out);
    return out[LAMBDA] / (2 * CUBE);
  };
  for (const l of [-1, -0.3, 0, 0.2, 1]) {
    // Terms end at c^2: this difference leaves the part linear in c.
    const linear = 4 * found(l, 1, 0.5) - found(l, 1, 1) - 3 * found(l, 1, 0);
    // Six digits of each coefficient.
    expect(Math.abs(found(l, 1, 0) - at(l, gaugeless))).toBeLessThan(
      1e-5 * at(Math.abs(l), gaugeless.map(Math.abs)),
    );
    expect(Math.abs(linear - at(l, strong))).toBeLessThan(1e-5 * at(Math.abs(l), strong.map(Math.abs)));
  }
});

/** A polynomial in l, lowest power first. */
function at(l: number, coefficients: readonly number[]): number {
  return coefficients.reduceRight((sum, coefficient) => sum * l + coefficient, 0);
}
