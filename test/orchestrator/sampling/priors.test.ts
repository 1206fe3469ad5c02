import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { priorOf } from '../../../orchestrator/sampling/priors.js';
import { sobol } from '../../../orchestrator/sampling/sobol.js';
import type { Axis } from '../../../orchestrator/scan/plan.js';

const N = 2 ** 16;

function sample(axis: Axis): Float64Array {
  const out = new Float64Array(N);
  sobol(1, { seed: 'moments', stratum: 0, generation: 0, input: axis.input })(0, N, out);
  priorOf(axis)(out);
  return out;
}

function mean(values: Float64Array, of: (x: number) => number = (x) => x): number {
  return values.reduce((sum, x) => sum + of(x), 0) / values.length;
}

function at(axis: Axis, u: number): number {
  const column = Float64Array.of(u);
  priorOf(axis)(column);
  return column[0];
}

const SMALLEST = 2 ** -53;
const LARGEST = 1 - 2 ** -53;

describe('moments agree with their closed forms', () => {
  test('gaussian: mean, variance, and standardised moments 0, 3, 0, 15', () => {
    const z = sample({ input: 'Mt', kind: 'gaussian', mean: 172.57, sigma: 0.29 }).map(
      (x) => (x - 172.57) / 0.29,
    );
    const moments = [1, 2, 3, 4, 5, 6].map((k) => mean(z, (x) => x ** k));
    [0, 1, 0, 3, 0, 15].forEach((exact, i) =>
      expect(Math.abs(moments[i] - exact)).toBeLessThan([1e-4, 1e-4, 1e-3, 2e-3, 0.02, 0.1][i]),
    );
  });

  test('gaussian: 68.27, 95.45 and 99.73 per cent within 1, 2, 3 standard deviations', () => {
    const z = sample({ input: 'x', kind: 'gaussian', mean: 0, sigma: 1 });
    const inside = [1, 2, 3].map((k) => mean(z, (x) => (Math.abs(x) <= k ? 1 : 0)));
    // erf(k / sqrt 2), Abramowitz and Stegun, table 26.1
    [0.6826894921, 0.9544997361, 0.9973002039].forEach((p, i) => expect(inside[i]).toBeCloseTo(p, 3));
  });

  test('logarithmic range: mean and variance of ln x, and mean of x', () => {
    const [a, b] = [1e4, 1.2209e19];
    const x = sample({ input: 'cutoff', kind: 'range', from: a, to: b, scale: 'log' });
    const width = Math.log(b / a);
    const middle = mean(x, Math.log);
    expect(middle / ((Math.log(a) + Math.log(b)) / 2)).toBeCloseTo(1, 6);
    expect(mean(x, (v) => (Math.log(v) - middle) ** 2) / (width ** 2 / 12)).toBeCloseTo(1, 4);
    expect(mean(x) / ((b - a) / width)).toBeCloseTo(1, 3);
  });

  test('linear range: mean, variance, fourth central moment', () => {
    const x = sample({ input: 'Mt', kind: 'range', from: 165, to: 180, scale: 'linear' });
    expect(mean(x)).toBeCloseTo(172.5, 3);
    expect(mean(x, (v) => (v - 172.5) ** 2) / (15 ** 2 / 12)).toBeCloseTo(1, 4);
    expect(mean(x, (v) => (v - 172.5) ** 4) / (15 ** 4 / 80)).toBeCloseTo(1, 4);
  });

  test('list: every value equally often', () => {
    const x = sample({ input: 'alphaS', kind: 'list', values: [0.1171, 0.118, 0.1189] });
    for (const value of [0.1171, 0.118, 0.1189])
      expect(mean(x, (v) => (v === value ? 1 : 0))).toBeCloseTo(1 / 3, 3);
  });
});

describe('values stay where they may', () => {
  const ends = fc.tuple(
    fc.double({ min: 1e-300, max: 1e300, noNaN: true }),
    fc.double({ min: 1e-300, max: 1e300, noNaN: true }),
  );
  test.each(['linear', 'log'] as const)('a %s range never gives its upper end nor leaves itself', (scale) => {
    fc.assert(
      fc.property(ends, fc.double({ min: SMALLEST, max: LARGEST, noNaN: true }), ([p, q], u) => {
        fc.pre(p !== q);
        const axis = { input: 'x', kind: 'range', from: Math.min(p, q), to: Math.max(p, q), scale } as const;
        return [SMALLEST, u, LARGEST].every((v) => at(axis, v) >= axis.from && at(axis, v) < axis.to);
      }),
      { numRuns: 2000 },
    );
  });

  test('ranges that end at or below zero do too', () => {
    for (const [from, to] of [
      [-1, 0],
      [-5, -1e-300],
      [-0.1, 0.1],
    ]) {
      const axis = { input: 'x', kind: 'range', from, to, scale: 'linear' } as const;
      expect(at(axis, LARGEST)).toBeLessThan(to);
      expect(at(axis, SMALLEST)).toBeGreaterThanOrEqual(from);
    }
  });

  test('a gaussian is finite and reaches at most 8.3 standard deviations', () => {
    const axis = { input: 'x', kind: 'gaussian', mean: 0, sigma: 1 } as const;
    expect(at(axis, SMALLEST)).toBeGreaterThan(-8.3);
    expect(at(axis, SMALLEST)).toBeLessThan(-8.1);
    expect(at(axis, LARGEST)).toBeLessThan(8.3);
  });

  test('a list gives its first and last value at the ends', () => {
    const axis = { input: 'x', kind: 'list', values: [1, 2, 3] } as const;
    expect([SMALLEST, LARGEST].map((u) => at(axis, u))).toEqual([1, 3]);
  });
});
