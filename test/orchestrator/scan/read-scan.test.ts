import { describe, expect, test } from 'vitest';
import { readScan } from '../../../orchestrator/scan/read-scan.js';
import type { Plan } from '../../../orchestrator/scan/plan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import { constraints } from '../../../workers/constraints/catalogue.js';
import { createEvaluator } from '../../../workers/evaluate.js';
import { standardModelInputs } from '../../../workers/models/standard-model-inputs.js';

function read(text: string, name = 'test.yaml'): Plan {
  return readScan(new TextEncoder().encode(text), name).plan;
}

const FULL = `
title: Where does the electroweak vacuum survive?
model: sm
seed: 20261201
sample: { method: sobol, points: 20000 }
vary:
  Mt:     { range: [165, 180], unit: GeV }
  Mh:     { gaussian: [125.20, 0.11], unit: GeV }
  alphaS: { list: [0.1171, 0.1180, 0.1189] }
  cutoff: { range: [1e4, 1.22e19], unit: GeV, scale: log }
fix:
  MW: { value: 80.3692, unit: GeV }
define:
  ratio: Mt / Mh
running: { loops: 3, tolerance: 1e-9 }
require: [perturbativity, { vacuum-stability: { accept: metastable } }]
note: [measured-top-mass]
keep: [all]
`;

describe('a plan', () => {
  test('has every default filled in', () => {
    const plan = read('model: sm\nvary: { Mt: { range: [165, 180] } }');
    const defaults = Object.fromEntries(standardModelInputs.map(({ name, default: value }) => [name, value]));
    delete defaults.Mt;
    expect(plan).toMatchObject({
      format: 1,
      title: 'Scan of sm',
      model: { name: 'sm', options: {} },
      seed: '1',
      strata: [
        {
          name: 'stratum-0',
          method: 'sobol',
          generation: 0,
          points: 10000,
          vary: [{ input: 'Mt', kind: 'range', from: 165, to: 180, scale: 'linear' }],
        },
      ],
      fix: defaults,
      define: [],
      running: { loops: 3, tolerance: 1e-9 },
      require: [],
      note: [],
    });
    expect(plan.keep).toContain('lambdaMin');
    expect(plan.remarks).toEqual(['nothing is required: every point that does not fail survives']);
  });

  test('of the design document reads as it is meant', () => {
    const plan = read(FULL);
    expect(plan.seed).toBe('20261201');
    expect(plan.strata[0].vary).toEqual([
      { input: 'Mh', kind: 'gaussian', mean: 125.2, sigma: 0.11 },
      { input: 'Mt', kind: 'range', from: 165, to: 180, scale: 'linear' },
      { input: 'alphaS', kind: 'list', values: [0.1171, 0.118, 0.1189] },
      { input: 'cutoff', kind: 'range', from: 1e4, to: 1.22e19, scale: 'log' },
    ]);
    expect(plan.define).toEqual([{ name: 'ratio', expression: 'Mt / Mh' }]);
    expect(plan.require.map(({ name, options }) => [name, options.accept])).toEqual([
      ['perturbativity', undefined],
      ['vacuum-stability', 'metastable'],
    ]);
    expect(plan.note.map(({ name }) => name)).toEqual(['measured-top-mass']);
    expect(plan.keep).toContain('ratio');
  });

  test.each<[string, string]>([
    [
      'with its sections and keys in another order',
      FULL.trim()
        .split(/\n(?=\S)/)
        .reverse()
        .join('\n'),
    ],
    ['with inputs in another order', FULL.replace(/( {2}Mt: .*\n)( {2}Mh: .*\n)/, '$2$1')],
    [
      'in other units',
      FULL.replace('[165, 180], unit: GeV', '[0.165, 0.180], unit: TeV').replace(
        '{ value: 80.3692, unit: GeV }',
        '{ unit: MeV, value: 80369.2 }',
      ),
    ],
    ['with bare numbers', FULL.replace('{ value: 80.3692, unit: GeV }', '80.3692')],
    [
      'with defaults left out',
      FULL.replace(/fix:\n.*\n/, '')
        .replace(/running: .*\n/, '')
        .replace(/keep: .*\n/, ''),
    ],
    ['with the seed in quotes', FULL.replace('20261201', '"20261201"')],
    ['with numbers written another way', FULL.replace('1.22e19', '12.2E+18').replace('[165', '[165.0')],
    ['with a list in another order', FULL.replace('0.1171, 0.1180, 0.1189', '0.1189, 0.1171, 0.118')],
    ['with comments, blank lines and Windows line ends', `# a comment\n\n${FULL}`.replaceAll('\n', '\r\n')],
    ['with an empty section', FULL.replace(/fix:\n.*\n/, 'fix:\n')],
    ['with a byte order mark', `\ufeff${FULL}`],
    ['with the model spelled out', FULL.replace('model: sm', 'model: { name: sm, options: {} }')],
    ['with a default option spelled out', FULL.replace('[perturbativity,', '[{ perturbativity: {} },')],
    ['with one stratum in a list', FULL.replace('{ method: sobol, points: 20000 }', '[{ points: 20000 }]')],
    [
      'with the axes under the stratum',
      FULL.replace(/sample: .*\nvary:/, 'sample:\n- points: 20000\n  vary:')
        .replace(/\n {2}(Mt|Mh|alphaS|cutoff): {4}/g, '\n    $1: ')
        .replace(/\n {2}(Mt|Mh|alphaS|cutoff):/g, '\n    $1:'),
    ],
    ['with other spaces in an expression', FULL.replace('Mt / Mh', '>\n    Mt\n      /  Mh')],
    [
      'as JSON',
      JSON.stringify(
        {
          title: 'Where does the electroweak vacuum survive?',
          model: 'sm',
          seed: 20261201,
          sample: { method: 'sobol', points: 20000 },
          vary: {
            Mt: { range: [165, 180] },
            Mh: { gaussian: [125.2, 0.11] },
            alphaS: { list: [0.1171, 0.118, 0.1189] },
            cutoff: { range: [1e4, 1.22e19], scale: 'log' },
          },
          define: { ratio: 'Mt / Mh' },
          require: ['perturbativity', { 'vacuum-stability': { accept: 'metastable' } }],
          note: ['measured-top-mass'],
        },
        null,
        '\t',
      ),
    ],
  ])('is the same %s', (_how, text) => {
    expect(text).not.toBe(FULL);
    expect(JSON.stringify(sorted(read(text, 'other.json')))).toBe(JSON.stringify(sorted(read(FULL))));
  });

  test('comes with the text as it was written', () => {
    expect(readScan(new TextEncoder().encode(FULL), 'x').text).toBe(FULL);
  });

  test('converts energies exactly', () => {
    const plan = read(
      'model: sm\nvary: { Mt: { list: [0.17257], unit: TeV } }\nfix: { mtau: { value: 1776.93, unit: MeV } }',
    );
    expect(plan.strata[0].vary[0]).toEqual({ input: 'Mt', kind: 'list', values: [172.57] });
    expect(plan.fix.mtau).toBe(1.77693);
  });

  test('has one zero', () => {
    const plan = read('model: sm\nvary: { Mt: { list: [170] } }\nfix: { ytShift: -0.0 }');
    expect(Object.is(plan.fix.ytShift, 0)).toBe(true);
  });
});

describe('strata', () => {
  const plan = read(`
model: sm
sample:
  - { name: measured, points: 100, vary: { alphaS: { gaussian: [0.118, 0.0009] } } }
  - { method: grid, vary: { Mt: { range: [165, 180], steps: 4 } } }
vary:
  Mh: { range: [100, 150], steps: 6 }
  Mt: { gaussian: [172.57, 0.29] }
fix: { alphaS: 0.119 }`);

  test('merge their own axes over the shared ones; steps stay with the grid', () => {
    expect(plan.strata).toEqual([
      {
        name: 'measured',
        method: 'sobol',
        generation: 0,
        points: 100,
        vary: [
          { input: 'Mh', kind: 'range', from: 100, to: 150, scale: 'linear' },
          { input: 'Mt', kind: 'gaussian', mean: 172.57, sigma: 0.29 },
          { input: 'alphaS', kind: 'gaussian', mean: 0.118, sigma: 0.0009 },
        ],
      },
      {
        name: 'stratum-1',
        method: 'grid',
        generation: 0,
        points: 24,
        vary: [
          { input: 'Mh', kind: 'range', from: 100, to: 150, scale: 'linear', steps: 6 },
          { input: 'Mt', kind: 'range', from: 165, to: 180, scale: 'linear', steps: 4 },
        ],
      },
    ]);
  });

  test('leave an input that they do not vary at its fixed value', () => {
    expect(plan.fix.alphaS).toBe(0.119);
    expect(plan.fix).not.toHaveProperty('Mt');
  });
});

describe('definitions', () => {
  const plan = read(`
model: sm
vary: { Mt: { range: [165, 180] } }
define:
  zeta: beta * 2
  beta: alpha + Mt
  alpha: 3
  Mh: Mt - 47
  cutoff: 10^(alpha + 4)
keep: [zeta, lambdaMin]
require: [vacuum-stability]`);

  test('stand in an order in which each needs only earlier ones', () => {
    expect(plan.define.map(({ name }) => name)).toEqual(['Mh', 'alpha', 'beta', 'cutoff', 'zeta']);
  });

  test('that bear the name of an input set it', () => {
    expect(plan.fix).not.toHaveProperty('Mh');
    expect(plan.fix).not.toHaveProperty('cutoff');
    expect(taskOf(plan).fixed).not.toHaveProperty('Mh');
  });

  test('keep adds what the constraints need to what is asked', () => {
    const needs = constraints.get('vacuum-stability')?.needs ?? [];
    expect(plan.keep).toEqual([...needs, 'lambdaMin', 'zeta'].sort());
    expect(needs.length).toBeGreaterThan(0);
  });

  test('are what the worker computes', () => {
    const task = taskOf(plan);
    const points = samplerOf(plan, 0).fill(0, 8);
    const { quantities } = createEvaluator(task).evaluate(points);
    const zeta = quantities.subarray(task.keep.indexOf('zeta') * 8, task.keep.indexOf('zeta') * 8 + 8);
    points.values.forEach((mt, i) => expect(zeta[i]).toBe((3 + mt) * 2));
  });
});

describe('remarks', () => {
  test('name inputs that are chosen but that nothing depends on', () => {
    const { remarks } = read(`
model: sm
vary: { GF: { range: [1.16e-5, 1.17e-5] } }
fix: { MZ: 91.2, MW: 80.4 }
require: [perturbativity]`);
    expect(remarks).toEqual([
      'MZ is fixed away from its default, but nothing in this plan depends on it',
      'GF is varied, but nothing in this plan depends on it',
    ]);
  });

  test('do not name one that a definition uses', () => {
    const { remarks } = read(`
model: sm
vary: { GF: { range: [1.16e-5, 1.17e-5] } }
define: { v: 1 / sqrt(sqrt(2) * GF) }
require: [perturbativity]`);
    expect(remarks).toEqual([]);
  });
});

test('taskOf splits a plan into what varies, what is fixed and what decides', () => {
  const plan = read(FULL);
  const task = taskOf(plan);
  expect(task.varied).toEqual(['Mh', 'Mt', 'alphaS', 'cutoff']);
  expect(Object.keys(task.fixed).sort()).toEqual([
    'GF',
    'MW',
    'MZ',
    'lambdaShift',
    'mb',
    'mtau',
    'topMassShift',
    'ytShift',
  ]);
  expect(task.constraints.map(({ name }) => name)).toEqual([
    'perturbativity',
    'vacuum-stability',
    'measured-top-mass',
  ]);
  expect(task.deciding).toBe(2);
  expect(task.keep).toBe(plan.keep);
});

function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted);
  if (typeof value !== 'object' || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, inner]) => [key, sorted(inner)]),
  );
}
