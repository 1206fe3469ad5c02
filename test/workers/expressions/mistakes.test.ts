import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compile, ExpressionError } from '../../../workers/expressions/compile.js';
import { DEEPEST, LONGEST } from '../../../workers/expressions/parse.js';
import { RESERVED } from '../../../workers/expressions/syntax.js';

function mistakeIn(text: string): ExpressionError | undefined {
  try {
    compile(text);
    return undefined;
  } catch (error) {
    if (error instanceof ExpressionError) return error;
    throw error;
  }
}

const OPERAND = 'a number, a name or a parenthesis';
const ANYTHING = 'a number, a name, an operator or a parenthesis';
const FUNCTION = 'one of the functions sqrt, exp, log, log10, abs, min, max';

describe('a mistake is told with its place, what was expected and what was found', () => {
  it.each([
    ['', 0, OPERAND, 'the end'],
    ['   ', 3, OPERAND, 'the end'],
    ['1 +', 3, OPERAND, 'the end'],
    ['1 + * 2', 4, OPERAND, "'*'"],
    ['(1 + 2', 6, "')'", 'the end'],
    ['1 + 2)', 5, 'an operator or the end', "')'"],
    ['Mt Mh', 3, 'an operator or the end', "'Mh'"],
    ['2 x', 2, 'an operator or the end', "'x'"],
    ['2x', 0, 'a number', "'2x'"],
    ['1.2.3', 0, 'a number', "'1.2.3'"],
    ['0x10', 0, 'a number', "'0x10'"],
    ['1_000', 0, 'a number', "'1_000'"],
    ['1e', 0, 'a number', "'1e'"],
    ['x + 1e999', 4, 'a number below 1.8e308', "'1e999'"],
    ['x = 1', 2, "'==' to compare", "'='"],
    ['x === 1', 4, "'==' to compare", "'='"],
    ['x ** 2', 2, "'^' for a power", "'**'"],
    ['a && b', 2, "'and'", "'&'"],
    ['a || b', 2, "'or'", "'|'"],
    ['!a', 0, "'not' or '!='", "'!'"],
    ['and 1', 0, OPERAND, "'and'"],
    ['1 or', 4, OPERAND, 'the end'],
    ['1 + not x', 4, "parentheses around 'not'", "'not'"],
    ['x == not y', 5, "parentheses around 'not'", "'not'"],
    ['sqrt', 4, "'(' after sqrt", 'the end'],
    ['sqrt x', 5, "'(' after sqrt", "'x'"],
    ['sqrt()', 5, OPERAND, "')'"],
    ['log(1, 2)', 0, 'one argument of log', '2'],
    ['1 + min(1)', 4, 'two or more arguments of min', '1'],
    ['max(1, 2', 8, "')'", 'the end'],
    ['max(1,)', 6, OPERAND, "')'"],
    ['sin(x)', 0, FUNCTION, "'sin'"],
    ['margin', 6, "'(' and the name of a constraint after margin", 'the end'],
    ['margin()', 7, 'the name of a constraint', "')'"],
    ['margin(Mt)', 7, 'the name of a constraint', "'M'"],
    ['margin(a-)', 8, "')'", "'-'"],
    ['met(a b)', 6, "')'", "'b'"],
    ['x.y', 1, ANYTHING, "'.'"],
    ['a[0]', 1, ANYTHING, "'['"],
    ["x > 'a'", 4, ANYTHING, `'''`],
    ['a; b', 1, ANYTHING, "';'"],
    ['λ > 0', 0, ANYTHING, 'the character U+03BB'],
    ['x\u00a0> 0', 1, ANYTHING, 'the character U+00A0'],
    ['\u{1F600}', 0, ANYTHING, 'the character U+1F600'],
    ['x \u202e', 2, ANYTHING, 'the character U+202E'],
    ['x\0', 1, ANYTHING, 'the character U+0000'],
  ])('%j', (text, position, expected, found) => {
    expect(mistakeIn(text)).toMatchObject({ code: 'expression', position, expected, found });
    expect(mistakeIn(text)?.message).toBe(`expected ${expected}, found ${found}`);
  });
});

describe('code is never run', () => {
  it.each([
    'process.exit(1)',
    'constructor.constructor("return process")()',
    'constructor(1)',
    '__proto__',
    'x => x',
    '(() => 1)()',
    'eval(1)',
    'Function(1)',
    'require("fs")',
    'import("fs")',
    '`x`',
    '${x}',
    'x ? y : z',
    'a, b',
    'x += 1',
    'globalThis["x"]',
    '1 /* x */',
    '1 // x',
    '/x/',
    '"a"',
    'new x()',
  ])('%s', (text) => {
    expect(mistakeIn(text)).toBeInstanceOf(ExpressionError);
  });
});

describe('size is limited', () => {
  it('in characters', () => {
    expect(mistakeIn('1+'.repeat(LONGEST / 2 - 1) + '11')).toBeUndefined();
    expect(mistakeIn('1+'.repeat(LONGEST / 2) + '1')).toMatchObject({
      position: LONGEST,
      expected: 'at most 2000 characters',
      found: '2001 characters',
    });
    expect(mistakeIn('('.repeat(1e7))).toMatchObject({ position: LONGEST });
  });

  it.each(['(', '-', '+', 'not ', 'abs(', '2^', 'min(1,', '1-(', '1<('])('in levels of %j', (opening) => {
    const closing = (n: number): string => ')'.repeat((opening.match(/\(/g) ?? []).length * n);
    const nested = (n: number): string => `${opening.repeat(n)}1${closing(n)}`;
    expect(mistakeIn(nested(20))).toBeUndefined();
    expect(mistakeIn(nested(DEEPEST))).toMatchObject({
      expected: 'at most 64 levels of nesting',
      found: 'more',
    });
    expect(mistakeIn(opening.repeat(Math.floor(LONGEST / opening.length)))).toBeInstanceOf(ExpressionError);
  });
});

describe('any text at all', () => {
  const words = [
    ...RESERVED,
    'x',
    '1',
    '.5',
    '1e3',
    'w-mass',
    '<',
    '<=',
    '==',
    '!=',
    '(',
    ')',
    ',',
    '+',
    '-',
    '*',
    '/',
    '^',
  ];
  const tokens = fc.array(fc.constantFrom(...words), { maxLength: 30 }).map((list) => list.join(' '));

  it.each([
    ['of any characters', fc.string({ unit: 'binary', maxLength: 200 })],
    ['of typing characters', fc.string({ unit: 'grapheme-ascii', maxLength: 60 })],
    ['of known words', tokens],
  ])('%s compiles or is a mistake inside the text', (_, texts) => {
    fc.assert(
      fc.property(texts, (text) => {
        const mistake = mistakeIn(text);
        if (mistake === undefined) return compile(text).names.every((name) => !RESERVED.has(name));
        return mistake.position >= 0 && mistake.position <= text.length;
      }),
      { numRuns: 2000 },
    );
  });
});
