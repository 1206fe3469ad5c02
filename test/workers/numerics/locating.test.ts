/** Roots, crossings and minima. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { crossings, subdivided } from '../../../workers/numerics/crossings.js';
import { createDop853 } from '../../../workers/numerics/dop853.js';
import { findRoot } from '../../../workers/numerics/find-root.js';
import { lowest, minimise } from '../../../workers/numerics/minimise.js';

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

describe('crossings', () => {
  it('of the sine are the multiples of pi, in the order of the samples', () => {
    const forwards = crossings(Math.sin, subdivided([0.5, 10], 8), 1e-13);
    expect(forwards).toHaveLength(3);
    forwards.forEach((x, i) => expect(x).toBeCloseTo((i + 1) * Math.PI, 11));
    expect(crossings(Math.sin, subdivided([10, 0.5], 8), 1e-13).map((x) => x.toFixed(9))).toEqual(
      forwards.map((x) => x.toFixed(9)).reverse(),
    );
  });

  // lambda(t) that dips below zero between two samples: the sign of the slope tells.
  const dips =
    (depth: number): Function1 =>
    (x) =>
      (x - 0.5) * (x - 0.5) - depth;
  const slope: Function1 = (x) => 2 * (x - 0.5);

  it.each([[[0, 1]], [[1, 0]], [[0, 0.3, 1]]])(
    'finds both zeros of a dip between the samples %j from the slope',
    (samples) => {
      const found = crossings(dips(0.01), samples, 1e-13, slope);
      const wanted = samples[0] === 0 ? [0.4, 0.6] : [0.6, 0.4];
      expect(found).toHaveLength(2);
      found.forEach((x, i) => expect(x).toBeCloseTo(wanted[i], 11));
      const upsideDown = crossings(
        (x) => -dips(0.01)(x),
        samples,
        1e-13,
        (x) => -slope(x),
      );
      upsideDown.forEach((x, i) => expect(x).toBeCloseTo(wanted[i], 11));
    },
  );

  it.each([
    ['stays above zero', dips(-0.01)],
    ['touches zero', dips(0)],
  ])('finds none where the dip %s', (_, f) => {
    expect(crossings(f, [0, 1], 1e-13, slope)).toEqual([]);
  });

  it.each([
    ['through zero at a sample', (x: number) => x - 1, [0, 1, 2], [1]],
    ['touching zero at a sample', (x: number) => (x - 1) * (x - 1), [0, 1, 2], []],
    ['from zero', (x: number) => -x, [0, 1, 2], []],
    ['to zero', (x: number) => 2 - x, [0, 1, 2], []],
    ['zero throughout', () => 0, [0, 1, 2], []],
    ['with a gap', (x: number) => (x === 1 ? NaN : x - 1), [0, 1, 2], []],
  ])('of a function %s', (_, f, samples, wanted) => {
    expect(crossings(f, samples, 1e-13)).toEqual(wanted);
  });

  it('along a trajectory finds what step ends alone would miss', () => {
    // y = cos(t): steps are longer than the time y spends below -0.999.
    const solver = createDop853(2, (_t, y, d) => {
      d[0] = -y[1];
      d[1] = y[0];
    });
    solver.integrate(0, 20, [1, 0], { rtol: 1e-9, atol: 1e-9, maxSteps: 1000 });
    const above: Function1 = (t) => solver.component(0, t) + 0.999;
    const rate: Function1 = (t) => -solver.component(1, t);
    const found = crossings(above, subdivided(solver.times, 2), 1e-12, rate);
    const half = Math.acos(0.999);
    const wanted = [1, 3, 5].flatMap((k) => [k * Math.PI - half, k * Math.PI + half]);
    expect(crossings(above, solver.times, 1e-12).length).toBeLessThan(wanted.length);
    expect(found).toHaveLength(wanted.length);
    found.forEach((t, i) => expect(Math.abs(t - wanted[i])).toBeLessThan(1e-6));
  });
});

describe('subdivided', () => {
  it.each([
    [[0, 1, 3], 2, [0, 0.5, 1, 2, 3]],
    [[3, 1], 4, [3, 2.5, 2, 1.5, 1]],
    [[0, 1], 1, [0, 1]],
    [[7], 3, [7]],
  ])('%j in %d parts', (times, parts, wanted) => {
    expect([...subdivided(times, parts)]).toEqual(wanted);
  });
});

describe('minimise', () => {
  it.each([
    ['a parabola', (x: number) => (x - 0.3) * (x - 0.3) + 2, 0, 1, 0.3, 2],
    ['the cosine', Math.cos, 0, 6, Math.PI, -1],
    ['a kink', (x: number) => Math.abs(x - 0.7), 0, 1, 0.7, 0],
    ['a slope that ends low', (x: number) => -x, 0, 1, 1, -1],
    ['a slope that starts low', (x: number) => x, 0, 1, 0, 0],
    ['a sextic valley', (x: number) => Math.pow(x - 0.2, 6), -1, 1, 0.2, 0],
  ])('%s', (_, f, a, b, x, value) => {
    const found = minimise(f, a, b, 1e-8);
    expect(Math.abs(found.value - value)).toBeLessThan(1e-7);
    expect(Math.abs(found.x - x)).toBeLessThan(value === 0 && x === 0.2 ? 1e-2 : 1e-7);
  });

  it('takes few steps on smooth functions', () => {
    const { f, calls } = counted(Math.cos);
    minimise(f, 0, 6, 1e-8);
    expect(calls()).toBeLessThanOrEqual(12);
  });

  it('always ends inside', () => {
    fc.assert(
      fc.property(fc.func(fc.double()), (f) => {
        const random = counted(f);
        const { x } = minimise(random.f, -2, 3, 1e-6);
        expect(random.calls()).toBeLessThan(1000);
        return x >= -2 && x <= 3;
      }),
    );
  });
});

describe('lowest', () => {
  const twoValleys: Function1 = (x) => (x * x - 1) * (x * x - 1) + 0.1 * x;

  it('takes the deeper of two valleys', () => {
    // Root of the derivative 4 x^3 - 4 x + 0.1 below zero.
    const x = findRoot((u) => 4 * u * u * u - 4 * u + 0.1, -1.5, -0.6, 1e-15);
    const found = lowest(twoValleys, subdivided([-2, 2], 16), 1e-9);
    expect(found.x).toBeCloseTo(x, 7);
    expect(found.value).toBeCloseTo(twoValleys(x), 14);
  });

  it.each([
    ['at the first sample', (x: number) => x, [0, 1, 2], 0],
    ['at the last sample', (x: number) => -x, [0, 1, 2], 2],
    ['at a decreasing sample', (x: number) => -x, [2, 1, 0], 2],
    ['at the only sample', (x: number) => -x, [2], 2],
    ['at the earlier of equals', () => 1, [0, 1, 2], 0],
    ['beyond a gap', (x: number) => (x < 2 ? NaN : x), [0, 1, 2, 3], 2],
  ])('%s', (_, f, samples, x) => {
    expect(lowest(f, samples, 1e-9)).toEqual({ x, value: f(x) });
  });

  it('is not a number where f never is one', () => {
    expect(lowest(() => NaN, [0, 1], 1e-9)).toEqual({ x: NaN, value: NaN });
  });
});
