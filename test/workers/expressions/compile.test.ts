import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compile } from '../../../workers/expressions/compile.js';
import { exp } from '../../../workers/numerics/exp.js';
import { log, log10 } from '../../../workers/numerics/log.js';
import { pow } from '../../../workers/numerics/pow.js';
import { generated, VARIABLES } from './generated.js';

const none = new Map<string, number>();
const value = (text: string, values: Readonly<Record<string, number>> = {}): number =>
  compile(text).evaluateOne(new Map(Object.entries(values)));

const anything = fc.double();
const variables = fc.tuple(anything, anything, anything);

describe('meaning', () => {
  // Textbook precedence; the power and chain rules as physicists write them (common practice, no source).
  it.each([
    ['1 + 2 * 3', 7],
    ['(1 + 2) * 3', 9],
    ['8 - 3 - 2', 3],
    ['16 / 4 / 2', 2],
    ['-2^2', -4],
    ['(-2)^2', 4],
    ['2^3^2', 512],
    ['2^-1', 0.5],
    ['2^-2^2', 0.0625],
    ['--3', 3],
    ['+3', 3],
    ['3 - -2', 5],
    ['-2 * 3', -6],
    ['1 < 2 < 3', 1],
    ['3 > 2 > 2', 0],
    ['1 < 3 > 2', 1],
    ['1 <= 1 < 2 == 2', 1],
    ['1 + 1 == 2', 1],
    ['2 != 3', 1],
    ['not 1 == 2', 1],
    ['not not 5', 1],
    ['1 or 0 and 0', 1],
    ['(1 or 0) and 0', 0],
    ['not 0 and 0', 0],
    ['7 and -1', 1],
    ['min(3, 1, 2)', 1],
    ['max(3, 1, 2)', 3],
    ['sqrt(abs(-16))', 4],
    ['pi', Math.PI],
    ['.5 + 2. + 1e3 + 1E-1 + 1.5e+1', 1017.6],
    ['(1 < 2) + (2 < 3)', 2],
    ['\t1\n+\r\n1 ', 2],
  ])('%s is %d', (text, result) => {
    expect(value(text)).toBe(result);
  });

  it.each([
    ['x < 1', 0],
    ['x >= 1', 0],
    ['x == x', 0],
    ['x != 1', 0],
    ['0 < x < 1', 0],
    ['not x', 1],
    ['x and 1', 0],
    ['x or 1', 1],
    ['min(x, 1)', NaN],
    ['max(1, x)', NaN],
    ['x + 1', NaN],
  ])('%s is %d where x is absent', (text, result) => {
    expect(value(text, { x: NaN })).toBe(result);
  });

  it.each([
    ['met(vacuum-stability)', 0, 1],
    ['met(vacuum-stability)', 1, 0],
    ['violated(vacuum-stability)', 1, 1],
    ['violated( vacuum-stability )', 2, 0],
    ['outcome(vacuum-stability) == 2', 2, 1],
    ['met(vacuum-stability)', NaN, 0],
  ])('%s with outcome %d is %d', (text, outcome, result) => {
    expect(value(text, { 'outcome(vacuum-stability)': outcome })).toBe(result);
  });

  it.each([
    ['surviving', 0],
    ['excluded', 1],
    ['failed', 2],
    ['unfinished', 3],
  ])('%s is verdict %d', (text, verdict) => {
    for (const other of [0, 1, 2, 3]) expect(value(text, { verdict: other })).toBe(other === verdict ? 1 : 0);
  });

  it('uses the portable exp, log and powers', () => {
    fc.assert(
      fc.property(anything, anything, (x, y) => {
        expect(value('exp(x)', { x })).toBe(exp(x));
        expect(value('log(x)', { x })).toBe(log(x));
        expect(value('log10(x)', { x })).toBe(log10(x));
        expect(value('x^y', { x, y })).toBe(pow(x, y));
      }),
    );
  });

  it('agrees bit for bit with JavaScript on generated expressions', () => {
    fc.assert(
      fc.property(generated, variables, ({ text, value: oracle }, v) => {
        const values = new Map(VARIABLES.map((name, i) => [name, v[i]]));
        expect([text, compile(text).evaluateOne(values)]).toEqual([text, oracle(v)]);
      }),
      { numRuns: 3000 },
    );
  });
});

describe('many rows', () => {
  it('gives each row what it would give alone, whatever its place and neighbours', () => {
    const rows = fc.array(variables, { minLength: 1, maxLength: 40 });
    fc.assert(
      fc.property(generated, rows, fc.nat({ max: 3000 }), ({ text, value: oracle }, some, offset) => {
        const count = offset + some.length;
        const columns = new Map(
          VARIABLES.map((name, i) => [name, column(count, (row) => some[row % some.length][i])]),
        );
        const out = new Float64Array(count);
        compile(text).evaluate(columns, count, out);
        for (const row of [0, offset, count - 1]) expect(out[row]).toBe(oracle(some[row % some.length]));
      }),
    );
  });

  it('leaves rows beyond count alone and reads no column it does not name', () => {
    const out = new Float64Array(3).fill(7);
    compile('x + 1').evaluate(new Map([['x', Float64Array.of(1, 2)]]), 2, out);
    expect([...out]).toEqual([2, 3, 7]);
  });

  it('says which column is missing or short', () => {
    const out = new Float64Array(2);
    expect(() => compile('x + y').evaluate(new Map([['x', out]]), 2, out)).toThrow(
      'expected a column y, found none',
    );
    expect(() => compile('x').evaluate(new Map([['x', out.subarray(1)]]), 2, out)).toThrow(RangeError);
    expect(() => compile('1').evaluate(new Map(), 3, out)).toThrow(RangeError);
  });

  it('does nothing for no rows', () => {
    compile('x').evaluate(new Map([['x', new Float64Array(0)]]), 0, new Float64Array(0));
  });
});

describe('names', () => {
  it.each([
    ['1 + pi', [], []],
    ['b + a * b', ['b', 'a'], [0, 4]],
    ['met(w-mass) and margin(w-mass) > 0', ['outcome(w-mass)', 'margin(w-mass)'], [0, 16]],
    ['surviving or lambdaAtCutoff < min(0, x_1)', ['verdict', 'lambdaAtCutoff', 'x_1'], [0, 13, 37]],
    ['likelihood(measured-top-mass)', ['likelihood(measured-top-mass)'], [0]],
  ])('of %s are listed once, in order, with where they stand', (text, names, positions) => {
    const compiled = compile(text);
    expect(compiled.names).toEqual(names);
    expect([...compiled.positions.values()]).toEqual(positions);
  });

  it('of objects are names like any other', () => {
    for (const name of [
      'constructor',
      'toString',
      'hasOwnProperty',
      'prototype',
      'undefined',
      'Infinity',
      'NaN',
    ]) {
      expect(compile(name).names).toEqual([name]);
      expect(value(`${name} + 1`, { [name]: 2 })).toBe(3);
      expect(() => compile(name).evaluateOne(none)).toThrow(`expected a column ${name}, found none`);
    }
  });
});

function column(count: number, at: (row: number) => number): Float64Array {
  return Float64Array.from({ length: count }, (_, row) => at(row));
}
