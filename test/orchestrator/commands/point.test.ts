import { describe, expect, it } from 'vitest';
import { launch } from '../../../orchestrator/commands/launch.js';
import { extend } from '../../../orchestrator/commands/extend.js';
import { point } from '../../../orchestrator/commands/point.js';
import { rejudge } from '../../../orchestrator/commands/rejudge.js';
import { storedPoint } from '../../../orchestrator/commands/stored-point.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { startReader } from '../../../orchestrator/store/reader-thread.js';
import { newStore, plane, reading, scan, work } from './small-runs.js';

const PLANCK = { Mt: 173.34, Mh: 125.15, alphaS: 0.1184, MW: 80.384, cutoff: 1.2209e19 };

describe('point', () => {
  /** Source: Buttazzo et al., Investigating the near-criticality of the Higgs boson, arXiv:1307.3536: couplings at
   *  M_Pl = 1.2209e19 GeV, three loops, central inputs; digits as printed there. */
  it('gives the published couplings of the Standard Model at the Planck scale', () => {
    const { couplings } = point({ model: 'sm', set: PLANCK, options: {} });
    expect(couplings.map(({ at, scale }) => [at, scale.value])).toEqual([
      ['start', 173.34],
      ['cutoff', 1.2209e19],
    ]);
    const { g1, g2, g3, yt, lambda } = couplings[1].values;
    expect(g1).toBeCloseTo(0.6154, 3);
    expect(g2).toBeCloseTo(0.5055, 3);
    expect(g3).toBeCloseTo(0.4873, 3);
    expect(yt).toBeCloseTo(0.3825, 3);
    expect(lambda).toBeCloseTo(-0.0143, 3);
  });

  it('has a unit for every input and quantity, an outcome for every constraint, and no NaN', () => {
    const facts = point({ model: 'sm', set: PLANCK, options: {} });
    for (const fact of [...Object.values(facts.inputs), ...Object.values(facts.quantities)])
      expect(fact.unit).not.toBe('');
    for (const fact of Object.values(facts.quantities))
      if (fact.value === null) expect(fact.absent).toBeTypeOf('string');
    for (const fact of Object.values(facts.constraints))
      expect(['met', 'violated', 'not-applicable']).toContain(fact.outcome);
    expect(JSON.parse(JSON.stringify(facts))).toEqual(facts);
    expect(facts).toMatchObject({ format: 1, model: 'sm', verdict: 'excluded', reason: null });
  });

  it('and a scan give the same bits for the same inputs', async () => {
    const store = newStore();
    const file = plane(40);
    await launch(file, work(store));
    const stored = await reading(store, (open) => {
      const names = open.columns(1).map((column) => column.name);
      const [batch] = open.batches(1, names);
      return (i: number) => new Map(names.map((name) => [name, batch.columns.get(name)![i]]));
    });
    for (const i of [0, 7, 39]) {
      const row = stored(i);
      const set = { Mt: row.get('Mt')!, Mh: row.get('Mh')! };
      const facts = point({ model: 'sm', set, options: {}, scan: file });
      for (const [name, { value }] of Object.entries(facts.quantities))
        expect([name, value ?? NaN]).toEqual([name, row.get(name)]);
      for (const [name, { margin, logLikelihood }] of Object.entries(facts.constraints)) {
        expect(margin ?? NaN).toBe(row.get(`margin(${name})`));
        expect(logLikelihood ?? NaN).toBe(row.get(`likelihood(${name})`));
      }
      expect(facts.quantities.ratio.value).toBe(set.Mt / set.Mh);
    }
  });

  it('of a store is evaluated again from its stored inputs, with no bit different', async () => {
    const store = newStore();
    await launch(plane(10), work(store));
    const questions = startReader(store);
    const run = (await questions.run(1))!;
    const found = (await storedPoint(questions, run, 0, 3))!;
    expect(found.differing).toEqual([]);
    expect(found.command).toMatch(
      /^npx trigpoint point sm --set Mt=\d.* --loops 3 --tolerance 1e-9 --scan plane\.yaml$/,
    );
    expect(found.trace.scales).toHaveLength(60);
    expect(found.trace.scales[0]).toBe(found.facts.inputs.Mt.value);
    expect(found.trace.values.map((values) => values.length)).toEqual(found.trace.couplings.map(() => 60));
    const start = found.facts.couplings[0].values;
    expect(found.trace.values.map(([first]) => first)).toEqual(Object.values(start));
    expect(await storedPoint(questions, run, 0, 10)).toBeUndefined();
    await questions.close();
  });

  it('of a run that was judged again, or of a child of it, has a command that judges as that run does', async () => {
    const store = newStore();
    await launch(plane(10), work(store));
    await rejudge('1', scan('require: [measured-top-mass]\nnote: []\n', 'other.yaml'), work(store));
    await extend('2', { points: ['20'] }, work(store));
    const questions = startReader(store);
    for (const id of [2, 3]) {
      const run = (await questions.run(id))!;
      const { facts, command } = (await storedPoint(questions, run, 0, 3, store))!;
      expect(command).toContain(`--tolerance 1e-9 --run ${id} --store ${store}`);
      const plan = JSON.parse(run.plan) as Plan;
      const set = Object.fromEntries(Object.entries(facts.inputs).map(([name, { value }]) => [name, value!]));
      expect(point({ model: 'sm', set, options: {}, plan }).fingerprint).toBe(facts.fingerprint);
    }
    await questions.close();
  });

  it('outside what the formulas are defined for fails as a result, with a reason', () => {
    const file = scan('model: sm\nvary: { Mh: { range: [100, 150] } }\ndefine: { Mt: 150 - Mh }\n', 'd.yaml');
    const facts = point({ model: 'sm', set: { Mh: 140 }, options: {}, scan: file });
    expect(facts.verdict).toBe('failed');
    expect(facts.reason).toMatch(/^domain/);
    expect(facts.inputs.Mt).toEqual({ value: 10, unit: 'GeV' });
    expect(JSON.parse(JSON.stringify(facts))).toEqual(facts);
  });

  it('of an input that a definition sets cannot be given a value', () => {
    const file = scan(
      'model: sm\nvary: { Mh: { range: [100, 150] } }\ndefine: { Mt: 150 + Mh / 5 }\n',
      'd.yaml',
    );
    expect(() => point({ model: 'sm', set: { Mt: 173 }, options: {}, scan: file })).toThrow(
      /expected an input of sm/,
    );
  });
});

describe('the fingerprint of a point', () => {
  const fingerprint = (changes: Partial<Parameters<typeof point>[0]> = {}) =>
    point({ model: 'sm', set: PLANCK, options: {}, ...changes }).fingerprint;

  it('is the same for the same question', () => {
    expect(fingerprint()).toBe(fingerprint());
    expect(fingerprint({ set: { ...PLANCK, MZ: 91.188 } })).toBe(fingerprint());
  });

  it.each([
    ['an input', { set: { ...PLANCK, Mt: 173.340000000001 } }],
    ['an input the running does not use', { set: { ...PLANCK, GF: 1.17e-5 } }],
    ['the order of the running', { loops: 2 as const }],
    ['the tolerance', { tolerance: 1e-8 }],
    [
      'the constraints',
      { scan: scan('model: sm\nvary: { Mt: { range: [165, 185] } }\nrequire: [perturbativity]\n') },
    ],
  ])('is another one with another value of %s', (_, changes) => {
    expect(fingerprint(changes)).not.toBe(fingerprint());
  });
});
