/** Oracle: mpmath 1.3.0 at 60 digits (test/golden/numerics/functions.py). Special values: ECMA-262 and IEEE 754-2019. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { exp } from '../../../workers/numerics/exp.js';
import { log, log10, log1p } from '../../../workers/numerics/log.js';
import { normalQuantile } from '../../../workers/numerics/normal-quantile.js';
import { pow } from '../../../workers/numerics/pow.js';
import { readGolden, ulp, ulpsOff, worst } from './golden.js';

const cases = [
  ['exp', exp, 1],
  ['log', log, 1],
  ['log10', log10, 1],
  ['log1p', log1p, 1],
  ['pow', pow, 1],
  // The source claims about 1 part in 10^16 for the rational functions; a logarithm and divisions come on top.
  ['quantile', normalQuantile, 5],
] as const;

describe('against mpmath', () => {
  it.each(cases)('%s is nearer than its stated number of units in the last place', (name, f, limit) => {
    expect(readGolden(name).length).toBeGreaterThan(700);
    expect(worst(name, f).ulps).toBeLessThan(limit);
  });

  it('tells a result that is one unit off from one that is not', () => {
    const [golden] = readGolden('exp');
    expect(ulpsOff(golden.rounded, golden)).toBeLessThanOrEqual(0.5);
    expect(ulpsOff(golden.rounded + 2 * ulp(golden.rounded), golden)).toBeGreaterThan(1);
  });
});

describe('special values', () => {
  it.each([
    [exp, 0, 1],
    [exp, -0, 1],
    [exp, Infinity, Infinity],
    [exp, -Infinity, 0],
    [exp, NaN, NaN],
    [exp, 709.7827128933841, Infinity],
    [exp, -745.1332191019411, 5e-324],
    [exp, -745.1332191019412, 0],
    [log, 1, 0],
    [log, 0, -Infinity],
    [log, -0, -Infinity],
    [log, -1, NaN],
    [log, -Infinity, NaN],
    [log, Infinity, Infinity],
    [log, NaN, NaN],
    [log10, 1, 0],
    [log10, 0, -Infinity],
    [log10, -1, NaN],
    [log10, Infinity, Infinity],
    [log10, NaN, NaN],
    [log1p, 0, 0],
    [log1p, -0, -0],
    [log1p, 5e-324, 5e-324],
    [log1p, -1, -Infinity],
    [log1p, -1.5, NaN],
    [log1p, -Infinity, NaN],
    [log1p, Infinity, Infinity],
    [log1p, NaN, NaN],
    [normalQuantile, 0, -Infinity],
    [normalQuantile, 1, Infinity],
    [normalQuantile, 0.5, 0],
    [normalQuantile, -0.1, NaN],
    [normalQuantile, 1.1, NaN],
    [normalQuantile, NaN, NaN],
  ] as const)('%o of %d is %d', (f, x, result) => {
    expect(f(x)).toBe(result);
  });

  it('of pow agree with ECMA-262 for every pair of special arguments', () => {
    const values = [
      0,
      0.5,
      1,
      1.5,
      2,
      3,
      2 ** 53,
      2 ** 53 - 1,
      1e300,
      Number.MAX_VALUE,
      Infinity,
      NaN,
      5e-324,
      1 + 2 ** -52,
    ];
    for (const x of [...values, ...values.map((value) => -value)]) {
      for (const y of [...values, ...values.map((value) => -value)]) {
        const [ours, standard] = [pow(x, y), Math.pow(x, y)];
        if (isFinite(standard) && standard !== 0)
          expect(Math.abs(ours - standard)).toBeLessThanOrEqual(ulp(standard));
        else expect([x, y, ours]).toEqual([x, y, standard]);
      }
    }
  });

  it('of pow beside the limits of the range are neither lost nor invented', () => {
    expect(pow(2, -1074)).toBe(5e-324);
    expect(pow(2, -1075)).toBe(0);
    expect(pow(2, 1023)).toBe(2 ** 1023);
    expect(pow(2, 1024)).toBe(Infinity);
    expect(pow(0.999, 3e9)).toBe(0);
  });
});

const finite = fc.double({ noNaN: true, noDefaultInfinity: true });

describe('properties', () => {
  it('log10 is exact at powers of ten', () => {
    for (let k = 0; k <= 22; k++) expect(log10(Number(`1e${k}`))).toBe(k);
  });

  it('pow is exact where the result is an integer below 2^53', () => {
    const base = fc.integer({ min: -1000, max: 1000 });
    fc.assert(
      fc.property(base, fc.integer({ min: 1, max: 52 }), (b, n) => {
        const exact = BigInt(b) ** BigInt(n);
        fc.pre(exact <= 2n ** 53n && exact >= -(2n ** 53n));
        return pow(b, n) === Number(exact);
      }),
    );
  });

  it('pow of a negative base is odd or even with its exponent, and not a number between integers', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-5, max: 1e5, noNaN: true }),
        fc.integer({ min: -50, max: 50 }),
        (x, n) => {
          const sign = n % 2 === 0 ? 1 : -1;
          return Object.is(pow(-x, n), sign * pow(x, n)) && Number.isNaN(pow(-x, n + 0.5));
        },
      ),
    );
  });

  it('exp and log never decrease', () => {
    fc.assert(fc.property(finite, finite, (a, b) => exp(Math.min(a, b)) <= exp(Math.max(a, b))));
    fc.assert(
      fc.property(finite, finite, (a, b) => {
        const [low, high] = [Math.min(Math.abs(a), Math.abs(b)), Math.max(Math.abs(a), Math.abs(b))];
        return log(low) <= log(high) && log10(low) <= log10(high) && log1p(low) <= log1p(high);
      }),
    );
  });

  it('agree with the platform everywhere, subnormals included, within 2 units in the last place', () => {
    const near = (a: number, b: number): boolean => Object.is(a, b) || Math.abs(a - b) <= 2 * ulp(b);
    fc.assert(fc.property(finite, (x) => near(exp(x), Math.exp(x)) && near(log(x), Math.log(x))));
    fc.assert(fc.property(finite, (x) => near(log1p(x), Math.log1p(x)) && near(log10(x), Math.log10(x))));
    // Beyond 2^31 the platform itself may be hundreds of units off near x = 1 (see pow.ts).
    const exponent = fc.double({ min: -(2 ** 31), max: 2 ** 31, noNaN: true });
    fc.assert(fc.property(finite, exponent, (x, y) => near(pow(x, y), Math.pow(x, y))));
    const moderate = fc.double({ min: 1e-20, max: 1e20, noNaN: true });
    const small = fc.double({ min: -15, max: 15, noNaN: true });
    fc.assert(fc.property(moderate, small, (x, y) => near(pow(x, y), Math.pow(x, y))));
  });

  it('the normal quantile is odd about one half', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 2 ** 30 - 1 }), (k) => {
        const p = k / 2 ** 30;
        return normalQuantile(p) + normalQuantile(1 - p) === 0;
      }),
    );
  });
});
