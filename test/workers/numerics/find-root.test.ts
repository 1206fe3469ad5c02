import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findRoot } from '../../../workers/numerics/find-root.js';

type Function1 = (x: number) => number;

function counted(f: Function1): { f: Function1; calls: () => number } {
  let calls = 0;
  return {
    f: (x) => {
      calls++;
      return f(x);
    },
    calls: () => calls,
  };
}

describe('findRoot', () => {
  it.each([
    ['a square root', (x: number) => x * x - 2, 0, 2, Math.SQRT2],
    ['the same from above', (x: number) => x * x - 2, 2, 0, Math.SQRT2],
    ['the fixed point of the cosine', (x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
    ['a zero at an end', (x: number) => x, 0, 1, 0],
    ['a zero at the other end', (x: number) => x - 1, 0, 1, 1],
    ['a steep one', (x: number) => Math.exp(50 * x) - 1, -1, 3, 0],
    ['a flat one', (x: number) => x * x * x * x * x, -1, 1.5, 0],
    ['a jump', (x: number) => (x < 0.3 ? -1 : 1), 0, 1, 0.3],
    ['infinite ends', (x: number) => Math.log(x) / (1 - x), 0, 0.5, NaN],
    ['no change of sign', (x: number) => x * x + 1, -1, 1, NaN],
    ['no number at an end', (x: number) => Math.sqrt(x) - 1, -1, 2, NaN],
    ['no number inside', (x: number) => (Math.abs(x) < 0.3 ? NaN : x), -1, 1, NaN],
  ])('%s', (_, f, a, b, root) => {
    const found = findRoot(f, a, b, 1e-12);
    if (Number.isNaN(root)) expect(found).toBeNaN();
    else expect(Math.abs(found - root)).toBeLessThanOrEqual(2e-12);
  });

  it.each([
    ['the fixed point of the cosine', (x: number) => Math.cos(x) - x, 0, 1, 10],
    // Wallis's equation, from ends where the cubic is far from any parabola; 58 bisections would do.
    ['x^3 - 2 x - 5 from far away', (x: number) => x * x * x - 2 * x - 5, 0, 1e5, 58],
  ])('takes few evaluations for %s', (_, f, a, b, ceiling) => {
    const watched = counted(f);
    findRoot(watched.f, a, b, 1e-12);
    expect(watched.calls()).toBeLessThanOrEqual(ceiling);
  });

  it('always ends between the ends with a change of sign, whatever the function', () => {
    const value = fc.double({ noNaN: true });
    fc.assert(
      fc.property(fc.func(value), fc.double({ min: -1e3, max: 1e3, noNaN: true }), (random, width) => {
        const ends = (x: number): number => (x === 0 ? -1 : x === width ? 1 : random(x));
        const { f, calls } = counted(ends);
        const root = findRoot(f, 0, width, 1e-10);
        if (width === 0) return Number.isNaN(root);
        expect(calls()).toBeLessThan(3000);
        return root >= Math.min(0, width) && root <= Math.max(0, width);
      }),
    );
  });

  it('ends with tolerance 0 as well', () => {
    fc.assert(
      fc.property(fc.double({ min: -1, max: 1, noNaN: true }), (root) => {
        const found = findRoot((x) => x - root, -1, 1.5, 0);
        return Math.abs(found - root) <= 4 * Number.EPSILON * Math.abs(root);
      }),
    );
  });
});
