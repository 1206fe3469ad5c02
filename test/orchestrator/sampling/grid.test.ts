import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { gridValues } from '../../../orchestrator/sampling/grid.js';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import { planOf } from './plan-of.js';

const range = (from: number, to: number, steps: number, scale: 'linear' | 'log' = 'linear') =>
  ({ input: 'x', kind: 'range', from, to, scale, steps }) as const;

describe('grid values', () => {
  test('have both ends exactly, also on a logarithmic scale', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-10, max: 1e10, noNaN: true }),
        fc.double({ min: 1.001, max: 1e10, noNaN: true }),
        fc.integer({ min: 2, max: 50 }),
        fc.constantFrom('linear', 'log'),
        (from, factor, steps, scale) => {
          const values = gridValues(range(from, from * factor, steps, scale));
          const rises = values.every((x, i) => i === 0 || x > values[i - 1]);
          return (
            values[0] === from && values[steps - 1] === from * factor && values.length === steps && rises
          );
        },
      ),
    );
  });

  test('are evenly spaced: 165 to 180 in 61 values is every quarter', () => {
    expect(gridValues(range(165, 180, 61))).toEqual(Array.from({ length: 61 }, (_, k) => 165 + k / 4));
  });

  test('are decades on a logarithmic scale', () => {
    gridValues(range(1e4, 1e19, 16, 'log')).forEach((x, k) => expect(x / 10 ** (k + 4)).toBeCloseTo(1, 13));
  });

  test('repeat bit for bit in a grid of half the step', () => {
    const coarse = gridValues(range(1e4, 1.2209e19, 24, 'log'));
    const fine = gridValues(range(1e4, 1.2209e19, 47, 'log'));
    expect(fine.filter((_, k) => k % 2 === 0)).toEqual(coarse);
  });
});

test('a grid visits the full product in mixed radix, the last input fastest', () => {
  const plan = planOf(`
sample: { method: grid }
vary: { Mt: { range: [170, 172], steps: 3 }, Mh: { list: [125, 124] }, alphaS: { range: [0.117, 0.119], steps: 2 } }`);
  const { values } = samplerOf(plan, 0).fill(0, 12);
  const rows = Array.from({ length: 12 }, (_, i) => [values[i], values[12 + i], values[24 + i]]);
  const product = [124, 125].flatMap((mh) =>
    [170, 171, 172].flatMap((mt) => [0.117, 0.119].map((a) => [mh, mt, a])),
  );
  expect(rows).toEqual(product);
  expect(plan.strata[0].points).toBe(12);
});
