import { describe, expect, it } from 'vitest';
import { constraints } from '../../../workers/constraints/catalogue.js';
import type { Constraint, Judgement, Options } from '../../../workers/contract.js';
import { createEvaluator } from '../../../workers/evaluate.js';
import { SETTINGS, sm, smTask, spread } from '../sm-task.js';

/* What every constraint promises, whatever it tests: a new one is covered by adding it to the catalogue. */

const quantities = sm.modules(SETTINGS, {}).flatMap((module) => module.gives.map((spec) => spec.name));
const inputs = sm.inputs.map((input) => input.name);
const all = [...inputs, ...quantities];

const task = smTask(['Mh', 'Mt', 'alphaS'], { keep: all });
const count = 400;
const result = createEvaluator(task).evaluate(
  spread(count, [
    [80, 250],
    [160, 200],
    [0.11, 0.125],
  ]),
);
const columns = new Map(all.map((name, k) => [name, result.quantities.subarray(k * count, (k + 1) * count)]));

function defaults(constraint: Constraint): Options {
  return Object.fromEntries(Object.entries(constraint.options).map(([name, spec]) => [name, spec.default]));
}

function judge(
  constraint: Constraint,
  from: ReadonlyMap<string, Float64Array>,
  rows: number,
  options = defaults(constraint),
): Judgement {
  const into = {
    outcome: new Uint8Array(rows).fill(9),
    margin: new Float64Array(rows),
    logLikelihood: new Float64Array(rows),
  };
  constraint.judge(from, options, into);
  return into;
}

describe.each([...constraints])('%s', (name, constraint) => {
  it('says what it is, where it comes from and what it neglects', () => {
    expect(constraint.name).toBe(name);
    expect(name).toMatch(/^[a-z]+(-[a-z]+)*$/);
    for (const text of [constraint.title, constraint.formula, constraint.marginScale, constraint.validity]) {
      expect(text).not.toBe('');
    }
    expect(constraint.neglects).not.toBe('');
    expect(constraint.sources.length).toBeGreaterThan(0);
    expect(constraint.code).toMatch(new RegExp(`/${name}\\.(ts|js)$`));
  });

  it('reads only columns that a store has, and nothing it does not name', () => {
    for (const need of constraint.needs) expect(all).toContain(need);
    const few = new Map(constraint.needs.map((need) => [need, columns.get(need)!]));
    expect(judge(constraint, few, count)).toEqual(judge(constraint, columns, count));
  });

  it('has defaults inside its options', () => {
    for (const spec of Object.values(constraint.options)) {
      if (spec.kind === 'choice') expect(spec.values).toContain(spec.default);
      else {
        expect(spec.default).toBeGreaterThanOrEqual(spec.range[0]);
        expect(spec.default).toBeLessThanOrEqual(spec.range[1]);
      }
    }
  });

  it('has a margin whose sign is the outcome, and meets and violates some points', () => {
    const { outcome, margin, logLikelihood } = judge(constraint, columns, count);
    for (let i = 0; i < count; i++) {
      expect(margin[i] >= 0).toBe(outcome[i] === 0);
      expect(Number.isNaN(margin[i])).toBe(outcome[i] === 2);
      expect(logLikelihood[i] <= 0 || Number.isNaN(logLikelihood[i])).toBe(true);
    }
    expect([...new Set(outcome)]).toEqual(expect.arrayContaining([0, 1]));
  });

  it('judges a point the same alone and among others', () => {
    const together = judge(constraint, columns, count);
    for (const i of [0, 17, count - 1]) {
      const alone = new Map([...columns].map(([key, values]) => [key, values.slice(i, i + 1)]));
      const found = judge(constraint, alone, 1);
      expect(found.outcome[0]).toBe(together.outcome[i]);
      expect(found.margin[0]).toBe(together.margin[i]);
    }
  });

  it('does not apply where its numbers are absent', () => {
    const absent = new Map(constraint.needs.map((need) => [need, Float64Array.of(NaN)]));
    const { outcome, margin } = judge(constraint, absent, 1);
    expect(outcome[0]).toBe(2);
    expect(margin[0]).toBeNaN();
  });

  it('explains a point in words, absent numbers included', () => {
    const options = defaults(constraint);
    for (const i of [0, 5, 50]) {
      const values = new Map([...columns].map(([key, column]) => [key, column[i]]));
      expect(constraint.explain(values, options)).toMatch(/\w+.*\d/);
      expect(constraint.explain(values, options)).not.toMatch(/NaN|undefined/);
    }
    expect(constraint.explain(new Map(), options)).not.toMatch(/undefined/);
  });
});
