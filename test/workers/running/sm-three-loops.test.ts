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
