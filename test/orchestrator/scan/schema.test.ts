import { readFileSync, readdirSync } from 'node:fs';
import { Ajv2020 } from 'ajv/dist/2020.js';
import { describe, expect, test } from 'vitest';
import { parse } from 'yaml';
import { constraints } from '../../../workers/constraints/catalogue.js';
import { models } from '../../../workers/models/catalogue.js';
import { scanSchema } from '../../../orchestrator/scan/schema.js';

const scans = new URL('../../../scans/', import.meta.url);
/** ajv is a validator of JSON Schema that others wrote; strict: unknown or contradictory keywords are errors. */
const valid = new Ajv2020({ strict: true, allowUnionTypes: true }).compile(scanSchema());

const accepts = (yaml: string): boolean => valid(parse(yaml));

describe('the JSON Schema of scan files', () => {
  test.each(readdirSync(scans).filter((file) => file.endsWith('.yaml')))('accepts the shipped %s', (file) => {
    expect(accepts(readFileSync(new URL(file, scans), 'utf8')), JSON.stringify(valid.errors)).toBe(true);
  });

  test.each([
    'model: sm',
    'model: { name: sm, options: {} }\nseed: abc\nvary: { Mt: { list: [170] } }',
    'model: sm\nsample: [{ name: a, method: grid, vary: { Mt: { range: [1, 2], steps: 3 } } }]',
    'model: sm\nfix: { MW: { value: 80, unit: GeV }, MZ: 91 }\ndefine: { r: Mt / Mh, cutoff: 1e16 }',
    'model: sm\nrequire: [perturbativity, { vacuum-stability: { accept: stable } }]\nkeep: [all, lambdaMin, mine]',
    'model: sm\nrunning: { loops: 2, tolerance: 1e-8 }',
  ])('accepts %j', (yaml) => {
    expect(accepts(yaml), JSON.stringify(valid.errors)).toBe(true);
  });

  test.each([
    'vary: {}',
    'model: smm',
    'model: sm\nfixx: {}',
    'model: sm\nseed: 1.5',
    'model: sm\nsample: { method: sobl }',
    'model: sm\nsample: { points: 0 }',
    'model: sm\nsample: { points: "10" }',
    'model: sm\nsample: []',
    'model: sm\nsample: [{ fix: {} }]',
    'model: sm\nvary: { mt: { range: [1, 2] } }',
    'model: sm\nvary: { Mt: [1, 2] }',
    'model: sm\nvary: { Mt: { range: [1, 2, 3] } }',
    'model: sm\nvary: { Mt: { range: [1, 2], list: [1] } }',
    'model: sm\nvary: { Mt: { gaussian: [1, 2], scale: log } }',
    'model: sm\nvary: { Mt: { range: [1, 2], scale: lg } }',
    'model: sm\nfix: { MW: heavy }',
    'model: sm\nfix: { MW: { value: 80 } }',
    'model: sm\ndefine: { my ratio: 1 }',
    'model: sm\nrunning: { loops: 4 }',
    'model: sm\nrunning: { tolerance: 0 }',
    'model: sm\nrequire: [perturbative]',
    'model: sm\nrequire: [{ vacuum-stability: { accept: maybe } }]',
    'model: sm\nrequire: [{ vacuum-stability: { accpt: stable } }]',
    'model: sm\nkeep: all',
  ])('refuses %j', (yaml) => {
    expect(accepts(yaml)).toBe(false);
  });

  test('describes every input, constraint and option for the editor', () => {
    const text = JSON.stringify(scanSchema());
    for (const model of models.values()) {
      for (const { meaning } of model.inputs) expect(text).toContain(JSON.stringify(meaning).slice(1, -1));
    }
    for (const { title, options } of constraints.values()) {
      expect(text).toContain(title);
      for (const { meaning } of Object.values(options))
        expect(text).toContain(JSON.stringify(meaning).slice(1, -1));
    }
  });
});
