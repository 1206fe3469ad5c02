import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { extendPlan } from '../../../orchestrator/sampling/extend.js';
import { gridValues } from '../../../orchestrator/sampling/grid.js';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import type { Wider } from '../../../orchestrator/sampling/widening.js';
import type { Axis, Plan, Stratum } from '../../../orchestrator/scan/plan.js';
import { planOf } from './plan-of.js';

const PLANE = `vary: { Mt: { range: [165, 180] }, Mh: { range: [120, 130] } }`;

function pointsOf(plan: Plan, stratum: number): string[] {
  const { values, count } = samplerOf(plan, stratum).fill(0, plan.strata[stratum].points);
  const columns = values.length / count;
  return Array.from({ length: count }, (_, i) =>
    Array.from({ length: columns }, (_c, c) => values[c * count + i]).join(),
  );
}

function total(plan: Plan): number {
  return plan.strata.reduce((sum, { points }) => sum + points, 0);
}

function expectKept(before: Plan, { plan, reused }: ReturnType<typeof extendPlan>): void {
  expect(reused.reduce((sum, { count }) => sum + count, 0)).toBe(total(before));
  for (const { stratum, first, count } of reused) {
    const old = samplerOf(before, stratum).fill(first, count);
    expect(samplerOf(plan, stratum).fill(first, count)).toEqual(old);
  }
}

describe('more points', () => {
  test.each(['uniform', 'sobol'])('a %s stratum continues: the earlier points keep their bits', (method) => {
    const before = planOf(`sample: { method: ${method}, points: 500 }\n${PLANE}`);
    const after = extendPlan(before, { points: 1234 });
    expect(after.plan.strata).toEqual([{ ...before.strata[0], points: 1234 }]);
    expect(after.notes).toEqual([]);
    expectKept(before, after);
    expect(new Set(pointsOf(after.plan, 0)).size).toBe(1234);
  });

  test('a latin hypercube stays; another one over the same box takes the new points, and a note says so', () => {
    const before = planOf(`sample: [{ name: cube, method: latin-hypercube, points: 100 }]\n${PLANE}`);
    const after = extendPlan(before, { points: 250 });
    expect(after.plan.strata.map(({ name, points }) => [name, points])).toEqual([
      ['cube', 100],
      ['cube+1', 150],
    ]);
    expect(after.plan.strata[1]).toMatchObject({ grownFrom: 'cube', vary: before.strata[0].vary });
    expect(after.notes.join()).toMatch(/cube is a latin hypercube, which cannot grow.*150 points.*sobol/);
    expectKept(before, after);
  });

  test('a new total is spread in proportion, largest remainders first; a grid keeps its points', () => {
    const before = planOf(`
sample:
  - { name: a, points: 10 }
  - { name: b, method: uniform, points: 20 }
  - { name: c, method: uniform, points: 1 }
  - { name: g, method: grid, vary: { Mt: { range: [170, 180], steps: 3 }, Mh: { list: [125] } } }
${PLANE}`);
    const { plan } = extendPlan(before, { points: 53 });
    // 50 for a, b, c: 500/31 = 16.13, 1000/31 = 32.26, 50/31 = 1.61
    expect(plan.strata.map(({ points }) => points)).toEqual([16, 32, 2, 3]);
  });

  test('any larger total is met exactly, and no stratum shrinks', () => {
    const counts = fc.array(fc.integer({ min: 1, max: 1_000_000 }), { minLength: 1, maxLength: 8 });
    fc.assert(
      fc.property(counts, fc.integer({ min: 1, max: 50_000_000 }), (points, more) => {
        const [stratum] = planOf(PLANE).strata;
        const strata = points.map((n, i) => ({ ...stratum, name: `s${i}`, points: n }));
        const before = { ...planOf(PLANE), strata };
        const { plan } = extendPlan(before, { points: total(before) + more });
        expect(total(plan)).toBe(total(before) + more);
        plan.strata.forEach((s, i) => expect(s.points).toBeGreaterThanOrEqual(points[i]));
      }),
      { numRuns: 100 },
    );
  });

  test('new counts by name leave the others alone', () => {
    const before = planOf(`sample: [{ name: a, points: 10 }, { name: b, points: 20 }]\n${PLANE}`);
    expect(extendPlan(before, { points: { b: 21 } }).plan.strata.map(({ points }) => points)).toEqual([
      10, 21,
    ]);
  });

  test.each<[string, number | Record<string, number>, RegExp]>([
    ['fewer points', 5, /--points: expected a whole number above the 30 points that the plan has, found 5/],
    ['as many points', 30, /above the 30 points.*new total/],
    ['half a point', 30.5, /found 30.5/],
    ['fewer in a stratum', { b: 20 }, /above the 20 points that b has, found 20/],
    [
      'an unknown stratum',
      { bb: 20 },
      /expected a stratum of the plan: a, b, found "bb" \(did you mean "b"\?\)/,
    ],
    ['too many', 1e9, /at most 100000000 points in all/],
  ])('refuses %s', (_what, points, message) => {
    const before = planOf(`sample: [{ name: a, points: 10 }, { name: b, points: 20 }]\n${PLANE}`);
    expect(() => extendPlan(before, { points })).toThrow(message);
  });

  test('a grid takes no number of points and is told what it can take', () => {
    const grid = planOf(`sample: { method: grid }\nvary: { Mt: { range: [165, 180], steps: 61 } }`);
    expect(() => extendPlan(grid, { points: 100 })).toThrow(/a grid.*--vary Mt=165:180:121 makes it finer/);
    expect(() => extendPlan(grid, { points: { 'stratum-0': 100 } })).toThrow(/--vary Mt=165:180:121/);
  });

  test('nothing new is a mistake', () => {
    expect(() => extendPlan(planOf(PLANE), {})).toThrow(/expected more than the run has, found nothing new/);
  });
});

/** Length in the sampling measure. */
function measure(axis: Axis): number {
  if (axis.kind === 'range')
    return axis.scale === 'log' ? Math.log(axis.to / axis.from) : axis.to - axis.from;
  return axis.kind === 'list' ? axis.values.length : 1;
}

function volume({ vary }: Stratum): number {
  return vary.reduce((product, axis) => product * measure(axis), 1);
}

function overlap(a: Axis, b: Axis): boolean {
  if (a.kind === 'range' && b.kind === 'range') return a.from < b.to && b.from < a.to;
  if (a.kind === 'list' && b.kind === 'list') return a.values.some((x) => b.values.includes(x));
  return true;
}

function expectDisjoint(strata: readonly Stratum[]): void {
  strata.forEach((a, i) =>
    strata
      .slice(0, i)
      .forEach((b) => expect(a.vary.every((axis, d) => overlap(axis, b.vary[d]))).toBe(false)),
  );
}

describe('a wider range', () => {
  test('appends what lies below and above, at the same density', () => {
    const before = planOf(`sample: [{ name: plane, points: 1500 }]\n${PLANE}`);
    const after = extendPlan(before, { vary: { Mt: { range: [160, 190] } } });
    expect(after.plan.strata.slice(1)).toEqual([
      {
        ...before.strata[0],
        name: 'plane+1',
        grownFrom: 'plane',
        points: 500,
        vary: [before.strata[0].vary[0], { input: 'Mt', kind: 'range', from: 160, to: 165, scale: 'linear' }],
      },
      {
        ...before.strata[0],
        name: 'plane+2',
        grownFrom: 'plane',
        points: 1000,
        vary: [before.strata[0].vary[0], { input: 'Mt', kind: 'range', from: 180, to: 190, scale: 'linear' }],
      },
    ]);
    expectKept(before, after);
  });

  test('any two growths in a row give disjoint boxes that fill the new box at one density', () => {
    const before = planOf(`
sample: { method: uniform, points: 4000 }
vary:
  Mt: { range: [150, 170] }
  alphaS: { list: [0.117, 0.118] }
  cutoff: { range: [1e10, 1e15], scale: log }
  Mh: { gaussian: [125, 1] }`);
    const wider = fc.record({
      Mt: fc.tuple(fc.integer({ min: 100, max: 150 }), fc.integer({ min: 170, max: 250 })),
      cutoff: fc.tuple(fc.integer({ min: 4, max: 10 }), fc.integer({ min: 15, max: 19 })),
      list: fc.subarray([0.11, 0.115, 0.119, 0.12]),
    });
    fc.assert(
      fc.property(wider, fc.integer({ min: 0, max: 40 }), ({ Mt, cutoff, list }, more) => {
        const steps: Record<string, Wider>[] = [
          { Mt: { range: Mt }, cutoff: { range: [10 ** cutoff[0], 10 ** cutoff[1]] as const } },
          {
            Mt: { range: [Mt[0] - more, Mt[1] + more + 1] as const },
            alphaS: { list: [0.117, 0.118, ...list] },
          },
        ];
        fc.pre(Mt[0] < 150 || Mt[1] > 170 || cutoff[0] < 10 || cutoff[1] > 15);
        const once = extendPlan(before, { vary: steps[0] }).plan;
        const { plan } = extendPlan(once, { vary: steps[1] });
        expect(plan.strata.slice(0, once.strata.length)).toEqual(once.strata);
        expectDisjoint(plan.strata);
        const whole =
          (Mt[1] - Mt[0] + 2 * more + 1) * Math.log(10) * (cutoff[1] - cutoff[0]) * (2 + list.length);
        expect(plan.strata.reduce((sum, s) => sum + volume(s), 0) / whole).toBeCloseTo(1, 9);
        const density = 4000 / volume(before.strata[0]);
        for (const s of plan.strata) expect(Math.abs(s.points - density * volume(s))).toBeLessThan(2);
      }),
      { numRuns: 200 },
    );
  });

  test('concerns the strata that vary the input over a range; a gaussian stays, and a note says so', () => {
    const before = planOf(`
sample:
  - { name: measured, points: 10, vary: { Mt: { gaussian: [172.57, 0.29] } } }
  - { name: plane, points: 10, vary: { Mt: { range: [165, 180] } } }
  - { name: other, points: 10, vary: { MW: { range: [80, 81] } } }
fix: { MW: 80.4, Mt: 172 }`);
    const { plan, notes } = extendPlan(before, { vary: { Mt: { range: [165, 195] } } });
    expect(plan.strata.map(({ name, points }) => [name, points])).toEqual([
      ['measured', 10],
      ['plane', 10],
      ['other', 10],
      ['plane+1', 10],
    ]);
    expect(notes).toEqual(['Mt is gaussian in measured, which stays as it is']);
  });

  test.each<[string, Record<string, object>, RegExp]>([
    [
      'a narrower range',
      { Mt: { range: [170, 190] } },
      /--vary Mt: expected a range that contains 165:180, found 170:190/,
    ],
    ['a reversed range', { Mt: { range: [190, 160] } }, /expected a range that rises, found 190:160/],
    ['not a number', { Mt: { range: [160, NaN] } }, /expected a range that rises/],
    [
      'a range outside the domain',
      { Mt: { range: [0, 190] } },
      /expected Mt from 50 to 300 GeV, found 0 GeV/,
    ],
    [
      'an input that is not varied',
      { MW: { range: [79, 81] } },
      /an input that the run varies.*: Mh, Mt, found "MW"/,
    ],
    ['a name no input has', { mt: { range: [160, 190] } }, /found "mt" \(did you mean "Mt"\?\)/],
    ['steps', { Mt: { range: [160, 190], steps: 10 } }, /steps only for a grid/],
    ['a list', { Mt: { list: [165, 180] } }, /expected a range, e.g. 160:185, found a list/],
    ['the same range', { Mt: { range: [165, 180] } }, /nothing new/],
  ])('refuses %s', (_what, vary, message) => {
    expect(() => extendPlan(planOf(PLANE), { vary })).toThrow(message);
  });
});

describe('a wider or finer grid', () => {
  const grid = planOf(`
sample: { method: grid }
vary:
  Mt: { range: [165, 180], steps: 16 }
  alphaS: { list: [0.117, 0.118] }
  cutoff: { range: [1e10, 1e16], steps: 3, scale: log }`);

  function expectFull(plan: Plan, axes: readonly Axis[]): void {
    const all = plan.strata.flatMap((_, s) => pointsOf(plan, s));
    const product = axes
      .map(gridValues)
      .reduce<number[][]>((rows, values) => rows.flatMap((row) => values.map((x) => [...row, x])), [[]]);
    expect(all.length).toBe(product.length);
    expect(new Set(all)).toEqual(new Set(product.map((row) => row.join())));
  }

  const mt = { input: 'Mt', kind: 'range', scale: 'linear' } as const;
  const cutoff = { input: 'cutoff', kind: 'range', scale: 'log' } as const;
  const list = { input: 'alphaS', kind: 'list' } as const;

  test('has every point of the new grid exactly once, the old ones as they were', () => {
    const after = extendPlan(grid, {
      vary: {
        Mt: { range: [160, 185], steps: 51 },
        cutoff: { steps: 5 },
        alphaS: { list: [0.116, 0.117, 0.118] },
      },
    });
    expectKept(grid, after);
    expectFull(after.plan, [
      { ...mt, from: 160, to: 185, steps: 51 },
      { ...list, values: [0.116, 0.117, 0.118] },
      { ...cutoff, from: 1e10, to: 1e16, steps: 5 },
    ]);
  });

  test('keeps its spacing on a wider range where no steps are given', () => {
    const { plan } = extendPlan(grid, { vary: { Mt: { range: [160, 190] } } });
    expectFull(plan, [
      { ...mt, from: 160, to: 190, steps: 31 },
      { ...list, values: [0.117, 0.118] },
      { ...cutoff, from: 1e10, to: 1e16, steps: 3 },
    ]);
  });

  test('grows again as one grid', () => {
    const once = extendPlan(grid, { vary: { Mt: { range: [160, 185] } } }).plan;
    const twice = extendPlan(once, {
      vary: { Mt: { steps: 51 }, alphaS: { list: [0.116, 0.117, 0.118] } },
    }).plan;
    expectFull(twice, [
      { ...mt, from: 160, to: 185, steps: 51 },
      { ...list, values: [0.116, 0.117, 0.118] },
      { ...cutoff, from: 1e10, to: 1e16, steps: 3 },
    ]);
  });

  test.each<[string, Record<string, object>, RegExp]>([
    [
      'steps that miss old values',
      { Mt: { steps: 20 } },
      /a grid that contains the old one of 16 values from 165 to 180.*165:180:31 would halve every step/,
    ],
    ['a narrower grid', { Mt: { range: [170, 180], steps: 100 } }, /a grid that contains the old one/],
    ['a range off the spacing', { Mt: { range: [160.5, 180] } }, /a grid that contains the old one/],
    [
      'a list without old values',
      { alphaS: { list: [0.117, 0.119] } },
      /a list that contains 0.117,0.118, found one without 0.118/,
    ],
    ['a range for a list', { alphaS: { range: [0.11, 0.12] } }, /expected a list/],
    ['absurd steps', { Mt: { steps: 1e12 } }, /expected 2 to 100000 steps, found 1000000000000/],
  ])('refuses %s', (_what, vary, message) => {
    expect(() => extendPlan(grid, { vary })).toThrow(message);
  });
});
