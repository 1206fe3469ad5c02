import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import { planOf } from './plan-of.js';

const VARY = `
vary:
  Mt: { gaussian: [172.57, 0.29], unit: GeV }
  cutoff: { range: [1e4, 1.2209e19], unit: GeV, scale: log }
  alphaS: { list: [0.117, 0.118, 0.119] }
  Mh: { range: [124, 126] }`;

const drawn = ['uniform', 'latin-hypercube', 'sobol'] as const;
const plans: Record<string, Plan> = Object.fromEntries(
  drawn.map((method) => [method, planOf(`sample: { method: ${method}, points: 3000 }${VARY}`)]),
);
plans.grid = planOf(`
sample: { method: grid }
vary: { Mt: { range: [170, 175], steps: 50 }, Mh: { range: [124, 126], steps: 60 } }`);

/** One point as its own block. */
function pointOf(plan: Plan, stratum: number, index: number): number[] {
  return [...samplerOf(plan, stratum).fill(index, 1).values];
}

describe.each(Object.entries(plans))('a %s stratum', (_method, plan) => {
  test('gives the same bits however points are split into blocks', () => {
    const columns = taskOf(plan).varied.length;
    const whole = samplerOf(plan, 0).fill(0, 3000).values;
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 2999 }), fc.integer({ min: 0, max: 300 }), (first, length) => {
        const count = Math.min(length, 3000 - first);
        const part = samplerOf(plan, 0).fill(first, count).values;
        for (let c = 0; c < columns; c++) {
          const expected = whole.slice(c * 3000 + first, c * 3000 + first + count);
          expect(part.slice(c * count, (c + 1) * count)).toEqual(expected);
        }
      }),
      { numRuns: 50 },
    );
  });

  test('knows nothing of other strata', () => {
    const other = planOf(`sample: { method: uniform, points: 7 }\nvary: { MW: { range: [80, 81] } }`)
      .strata[0];
    const more = {
      ...plan,
      strata: [plan.strata[0], { ...other, name: 'other' }],
      fix: { MW: 80.3692, ...plan.fix },
    };
    const mine = taskOf(plan).varied.map((name) => taskOf(more).varied.indexOf(name));
    for (const index of [0, 1, 17, 2999]) {
      const wide = pointOf(more, 0, index);
      expect(mine.map((c) => wide[c])).toEqual(pointOf(plan, 0, index));
    }
  });

  test('refuses points outside itself', () => {
    expect(() => samplerOf(plan, 0).fill(2999, 2)).toThrow(RangeError);
    expect(() => samplerOf(plan, 0).fill(-1, 1)).toThrow(RangeError);
  });
});

test.each(['uniform', 'sobol'] as const)('%s points do not depend on how many there are', (method) => {
  const few = plans[method];
  fc.assert(
    fc.property(
      fc.integer({ min: 3001, max: 100_000_000 }),
      fc.integer({ min: 0, max: 2999 }),
      (points, index) => {
        const many = { ...few, strata: [{ ...few.strata[0], points }] };
        expect(pointOf(many, 0, index)).toEqual(pointOf(few, 0, index));
      },
    ),
    { numRuns: 50 },
  );
});

test.each(drawn)(
  '%s points change with the seed, the position of the stratum and its generation',
  (method) => {
    const plan = plans[method];
    const [stratum] = plan.strata;
    const variants = [
      pointOf(plan, 0, 5),
      pointOf({ ...plan, seed: '2' }, 0, 5),
      pointOf({ ...plan, strata: [stratum, stratum] }, 1, 5),
      pointOf({ ...plan, strata: [{ ...stratum, generation: 1 }] }, 0, 5),
    ];
    expect(new Set(variants.map((values) => values.join())).size).toBe(4);
  },
);

test('columns follow taskOf(plan).varied; what a stratum does not vary has its fixed value', () => {
  const plan = planOf(`
sample:
  - { name: a, points: 4, vary: { Mt: { range: [165, 180] } } }
  - { name: b, points: 4, vary: { Mh: { range: [120, 130] } } }
fix: { Mt: 171, Mh: 125 }`);
  expect(taskOf(plan).varied).toEqual(['Mh', 'Mt']);
  expect(taskOf(plan).fixed).not.toHaveProperty('Mt');
  const [a, b] = [0, 1].map((stratum) => samplerOf(plan, stratum).fill(0, 4).values);
  expect([...a.slice(0, 4)]).toEqual([125, 125, 125, 125]);
  expect([...b.slice(4)]).toEqual([171, 171, 171, 171]);
  expect([...a.slice(4)].every((x) => x >= 165 && x < 180)).toBe(true);
  expect([...b.slice(0, 4)].every((x) => x >= 120 && x < 130)).toBe(true);
});

test('a uniform point does not change when the stratum varies one more input', () => {
  const one = planOf(`sample: { method: uniform, points: 10 }\nvary: { Mt: { range: [165, 180] } }`);
  const two = planOf(`
sample: { method: uniform, points: 10 }
vary: { Mt: { range: [165, 180] }, Mh: { range: [120, 130] } }`);
  expect(samplerOf(two, 0).fill(0, 10).values.slice(10)).toEqual(samplerOf(one, 0).fill(0, 10).values);
});
