import { describe, expect, it } from 'vitest';
import type { Block, Model, Module, PointsBlock } from '../../workers/contract.js';
import { createEvaluator } from '../../workers/evaluate.js';
import { createPipeline } from '../../workers/pipeline.js';
import { row, SETTINGS, sm, smTask, spread } from './sm-task.js';

const VARIED = ['Mh', 'Mt', 'alphaS', 'cutoff'];
const WIDE = [
  [1, 1000],
  [50, 300],
  [0.08, 0.15],
  [1e3, 1e20],
] as const;

function part({ count, values }: PointsBlock, first: number, size: number): PointsBlock {
  const columns = values.length / count;
  const cut = new Float64Array(columns * size);
  for (let k = 0; k < columns; k++)
    cut.set(values.subarray(k * count + first, k * count + first + size), k * size);
  return { count: size, values: cut };
}

describe('a point does not depend on its company', () => {
  const points = spread(70, WIDE);
  const task = smTask(VARIED);
  const expected = createEvaluator(task).evaluate(points);

  it.each([1, 7, 64, 1000])('blocks of %i points give the same bits', (block) => {
    const found = createEvaluator(task, block).evaluate(points);
    for (let i = 0; i < points.count; i++) expect(row(found, i)).toEqual(row(expected, i));
  });

  it.each([1, 13, 50])('chunks of %i points give the same bits', (size) => {
    const evaluator = createEvaluator(task);
    for (let first = 0; first < points.count; first += size) {
      const chunk = part(points, first, Math.min(size, points.count - first));
      const found = evaluator.evaluate(chunk);
      for (let i = 0; i < chunk.count; i++) expect(row(found, i)).toEqual(row(expected, first + i));
    }
  });

  it('neither does it depend on failed neighbours or on what was evaluated before', () => {
    const evaluator = createEvaluator(task);
    const broken: PointsBlock = { count: points.count, values: points.values.slice() };
    for (let i = 0; i < broken.count; i += 3) broken.values[broken.count + i] = NaN;
    const found = evaluator.evaluate(broken);
    evaluator.evaluate(spread(64, [...WIDE].reverse()));
    const again = evaluator.evaluate(points);
    for (let i = 0; i < points.count; i++) {
      expect(row(again, i)).toEqual(row(expected, i));
      if (i % 3 !== 0) expect(row(found, i)).toEqual(row(expected, i));
    }
  });
});

describe('every point of the domain has a result', () => {
  it('finite or absent with a reason, and none fails', () => {
    const task = smTask(VARIED);
    const points = spread(600, WIDE);
    const result = createEvaluator(task).evaluate(points);
    expect([...new Set(result.failures)]).toEqual([0]);
    const specs = sm.modules(SETTINGS, {}).flatMap((module) => module.gives);
    specs.forEach(({ name, absent }, k) => {
      const values = result.quantities.subarray(k * result.count, (k + 1) * result.count);
      const wrong = values.findIndex(
        (value) => !isFinite(value) && !(absent !== undefined && Number.isNaN(value)),
      );
      expect([name, wrong]).toEqual([name, -1]);
    });
    const classes = new Set(result.quantities.subarray(task.keep.indexOf('vacuumClass') * result.count));
    expect([...classes].sort()).toEqual([0, 1, 2, 3]);
  });

  it.each([1e-3, 1e-9])('whose parts agree with each other at tolerance %s', (tolerance) => {
    const varied = [...VARIED, 'lambdaShift', 'ytShift'];
    const task = smTask(varied, { running: { loops: 2, tolerance } });
    const result = createEvaluator(task).evaluate(spread(500, [...WIDE, [-0.1, 0.1], [-0.1, 0.1]]));
    const column = (name: string): Float64Array => {
      const k = task.keep.indexOf(name);
      return result.quantities.subarray(k * result.count, (k + 1) * result.count);
    };
    const present = (name: string, i: number): boolean => !Number.isNaN(column(name)[i]);
    const broken: string[] = [];
    for (let i = 0; i < result.count; i++) {
      const promises = {
        'unstable potential has its scale': column('lambdaEffMin')[i] < 0 === present('instabilityScale', i),
        'negative quartic has its scale': column('lambdaMin')[i] < 0 === present('lambdaZeroScale', i),
        'barrier below instability': !(column('barrierField')[i] > column('instabilityScale')[i]),
        'zero not above the minimum': !(
          column('lambdaZeroScale')[i] >
          column('lambdaMinScale')[i] * (1 + 1e-9)
        ),
        'stable is positive': column('vacuumClass')[i] !== 0 || column('lambdaEffMin')[i] >= 0,
        'stable and metastable are perturbative, what is neither is not':
          column('vacuumClass')[i] === 2 ||
          (column('vacuumClass')[i] === 3) === present('perturbativityScale', i),
        'unstable has decayed': column('vacuumClass')[i] !== 2 || column('vacuumDecayExponent')[i] >= 0,
        'metastable has not': column('vacuumClass')[i] !== 1 || !(column('vacuumDecayExponent')[i] > 0),
      };
      for (const [promise, kept] of Object.entries(promises))
        if (!kept) broken.push(`${promise}: point ${i}`);
    }
    expect(broken).toEqual([]);
  });

  it('even where the quartic only just dips below zero between two steps of a coarse running', () => {
    const inputs = {
      ...{ GF: 1.1054039231661705e-5, MW: 80.54909326412462, MZ: 90.5, Mh: 575.7263656987816 },
      ...{
        Mt: 181.2415382211043,
        alphaS: 0.11805096037010115,
        cutoff: 2737372352094880000,
        lambdaShift: 0.1,
      },
      ...{ mb: 4.712608581773566, mtau: 2, topMassShift: 3.3, ytShift: 0.08723249411214057 },
    };
    const task = smTask([], { running: { loops: 2, tolerance: 1e-3 }, fixed: inputs });
    const { quantities } = createEvaluator(task).evaluate({ count: 1, values: new Float64Array(0) });
    const value = (name: string): number => quantities[task.keep.indexOf(name)];
    expect(value('barrierField')).toBeLessThan(value('instabilityScale'));
  });

  it('at the corners too, at every number of loops', () => {
    const corner = (i: number): number[] => WIDE.map((range, k) => range[(i >> k) & 1]);
    const values = new Float64Array(64);
    for (let i = 0; i < 16; i++) corner(i).forEach((value, k) => (values[k * 16 + i] = value));
    for (const loops of [1, 2, 3] as const) {
      const task = smTask(VARIED, { running: { loops, tolerance: 1e-9 } });
      expect([...createEvaluator(task).evaluate({ count: 16, values }).failures]).toEqual(Array(16).fill(0));
    }
  });
});

describe('inputs outside the domain', () => {
  it.each([
    ['Mt', 301],
    ['Mt', 49],
    ['Mh', -1],
    ['alphaS', NaN],
    ['cutoff', Infinity],
    ['MZ', 80],
  ])('%s = %s fails as a result', (name, value) => {
    const task = smTask(['Mh', name]);
    const result = createEvaluator(smTask([name])).evaluate({ count: 1, values: Float64Array.of(value) });
    expect(result.failures[0]).toBe(1);
    expect(result.verdicts[0]).toBe(2);
    expect([...result.outcomes]).toEqual(task.constraints.map(() => 2));
    expect(result.margins.every(Number.isNaN)).toBe(true);
    expect(result.logLikelihoods.every(Number.isNaN)).toBe(true);
    expect(result.quantities.every(Number.isNaN)).toBe(true);
  });
});

describe('definitions', () => {
  it('are kept, may build on each other and may set an input', () => {
    const direct = createEvaluator(smTask(['Mt'])).evaluate({ count: 1, values: Float64Array.of(174) });
    const base = smTask(['half']);
    const fixed = Object.fromEntries(Object.entries(base.fixed).filter(([name]) => name !== 'Mt'));
    const task = smTask(['Mh'], {
      fixed: { ...fixed, Mh: 125.2 },
      define: [
        { name: 'half', expression: '85 + 2' },
        { name: 'Mt', expression: '2 * half' },
        { name: 'ratio', expression: 'Mt / Mh' },
      ],
      keep: ['ratio', 'lambdaAtCutoff'],
    });
    const result = createEvaluator(task).evaluate({ count: 2, values: Float64Array.of(125.2, 120) });
    expect([...result.quantities.subarray(0, 2)]).toEqual([174 / 125.2, 174 / 120]);
    expect(result.quantities[2]).toBe(direct.quantities[base.keep.indexOf('lambdaAtCutoff')]);
  });
});

describe('verdicts', () => {
  const at = (deciding: number, Mt: number) =>
    createEvaluator(smTask(['Mt'], { deciding })).evaluate({ count: 1, values: Float64Array.of(Mt) });

  it('come from the deciding constraints only', () => {
    // The default vacuum-stability accepts stable vacua only: today's point is excluded by the second constraint.
    expect(at(1, 172.57).verdicts[0]).toBe(0);
    expect(at(2, 172.57).verdicts[0]).toBe(1);
    expect(at(2, 170).verdicts[0]).toBe(0);
    // 170 GeV is 8.9 standard deviations from the measured top mass.
    expect(at(5, 170).verdicts[0]).toBe(1);
  });
});

describe('trace', () => {
  it('shares the path of a scan: the same bits at both ends', () => {
    const inputs = new Map([
      ['Mt', 173.34],
      ['Mh', 125.15],
      ['cutoff', 1.2209e19],
    ]);
    const task = smTask([...inputs.keys()]);
    const result = createEvaluator(task).evaluate({ count: 1, values: Float64Array.from(inputs.values()) });
    const [start, cutoff] = sm.trace(SETTINGS, {}, inputs, [173.34, 1.2209e19]);
    sm.couplings.forEach(({ name }, i) => {
      expect(start[i]).toBe(result.quantities[task.keep.indexOf(`${name}AtStart`)]);
      expect(cutoff[i]).toBe(result.quantities[task.keep.indexOf(`${name}AtCutoff`)]);
    });
  });

  it('is absent beyond the ends and where the running stopped', () => {
    const inputs = new Map([
      ['Mh', 400],
      ['cutoff', 1e16],
    ]);
    const [below, inside, blownUp, beyond] = sm.trace(SETTINGS, {}, inputs, [100, 1000, 1e15, 1e17]);
    expect(below.every(Number.isNaN)).toBe(true);
    expect(inside.every(Number.isFinite)).toBe(true);
    expect(blownUp.every(Number.isNaN)).toBe(true);
    expect(beyond.every(Number.isNaN)).toBe(true);
  });
});

describe('a module that breaks its promise', () => {
  const module = (fill: number, absent?: string): Module => ({
    ...{ name: 'broken', code: '', needs: [] },
    gives: [{ name: 'x', unit: '1', symbol: 'x', meaning: '', absent }],
    evaluate: (block: Block) => void block.columns.set('x', new Float64Array(block.count).fill(fill)),
  });
  const failure = (fill: number, absent?: string): number => {
    const model: Model = { ...sm, inputs: [], modules: () => [module(fill, absent)] };
    const task = smTask([], { fixed: {}, keep: ['x'], constraints: [], deciding: 0 });
    const into = createEvaluator(smTask(['Mt'], { keep: ['vacuumClass'], constraints: [] })).evaluate({
      count: 1,
      values: Float64Array.of(173),
    });
    createPipeline(task, model, [])({ count: 1, values: new Float64Array(0) }, 0, 1, into);
    return into.failures[0];
  };

  it('fails the point: not-finite', () => {
    expect(failure(1)).toBe(0);
    expect(failure(NaN)).toBe(4);
    expect(failure(NaN, 'may be absent')).toBe(0);
    expect(failure(Infinity, 'may be absent')).toBe(4);
  });
});

describe('a task that nobody can do', () => {
  it('is refused at once', () => {
    expect(() => createEvaluator(smTask(['Mt'], { model: { name: 'no', options: {} } }))).toThrow(/model/);
    const strange = smTask(['Mt'], { constraints: [{ name: 'no', options: {} }] });
    expect(() => createEvaluator(strange)).toThrow(/constraint/);
    const keep = createEvaluator(smTask(['Mt'], { keep: ['no'] }));
    expect(() => keep.evaluate({ count: 1, values: Float64Array.of(173) })).toThrow(/keep/);
  });
});
