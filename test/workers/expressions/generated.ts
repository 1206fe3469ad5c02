/** Random expressions with an independent meaning: each is written once in the expression language, with as few
 *  parentheses as its precedence rules allow, and once in JavaScript with all of them. */
import fc from 'fast-check';
import { pow } from '../../../workers/numerics/pow.js';

export const VARIABLES = ['x', 'Mt', 'margin(perturbativity)'] as const;

/** A text in both languages and how strongly its outermost operator binds (1 `or` ... 8 `^`, 9 an atom). */
interface Both {
  readonly ours: string;
  readonly js: string;
  readonly level: number;
}

export interface Generated {
  readonly text: string;
  readonly value: (variables: readonly number[]) => number;
}

const COMPARISONS = ['<', '<=', '>', '>=', '==', '!='] as const;

const atom = fc.oneof(
  fc.double({ min: 0, max: 1e6, noNaN: true }).map((value) => both(String(value), String(value), 9)),
  fc.constant(both('pi', 'Math.PI', 9)),
  fc.nat({ max: VARIABLES.length - 1 }).map((i) => both(VARIABLES[i], `v[${i}]`, 9)),
);

const { expression } = fc.letrec<{ expression: Both }>((tie) => ({
  expression: fc.oneof(
    { maxDepth: 6, depthIdentifier: 'expression', withCrossShrink: true },
    atom,
    fc
      .tuple(fc.constantFrom('+', '-'), tie('expression'), tie('expression'))
      .map(([o, a, b]) => infix(o, o, 5, a, b)),
    fc
      .tuple(fc.constantFrom('*', '/'), tie('expression'), tie('expression'))
      .map(([o, a, b]) => infix(o, o, 6, a, b)),
    fc.tuple(tie('expression'), tie('expression')).map(([a, b]) => power(a, b)),
    tie('expression').map((a) => both(`-${at(a, 7)}`, `(-${a.js})`, 7)),
    tie('expression').map((a) => both(`not ${at(a, 3)}`, `(truth(${a.js}) ? 0 : 1)`, 3)),
    fc.tuple(tie('expression'), tie('expression')).map(([a, b]) => logical('and', '&&', 2, a, b)),
    fc.tuple(tie('expression'), tie('expression')).map(([a, b]) => logical('or', '||', 1, a, b)),
    fc
      .tuple(
        tie('expression'),
        fc.array(fc.tuple(fc.constantFrom(...COMPARISONS), tie('expression')), {
          minLength: 1,
          maxLength: 3,
        }),
      )
      .map(([first, rest]) => chain(first, rest)),
    fc.tuple(fc.constantFrom('sqrt', 'abs'), tie('expression')).map(([f, a]) => call(f, [a])),
    fc
      .tuple(fc.constantFrom('min', 'max'), fc.array(tie('expression'), { minLength: 2, maxLength: 4 }))
      .map(([f, a]) => call(f, a)),
  ),
}));

/** Expressions short enough to be allowed. */
export const generated: fc.Arbitrary<Generated> = expression
  .filter(({ ours }) => ours.length <= 2000)
  .map(({ ours, js }) => ({ text: ours, value: asFunction(js) }));

function asFunction(js: string): Generated['value'] {
  const truth = (value: number): boolean => !Number.isNaN(value) && value !== 0;
  // eslint-disable-next-line @typescript-eslint/no-implied-eval -- JavaScript itself is the oracle of this test
  const body = new Function('v', 'truth', 'pow', `return ${js};`) as (...environment: unknown[]) => number;
  return (variables) => body(variables, truth, pow);
}

function both(ours: string, js: string, level: number): Both {
  return { ours, js, level };
}

/** The text of an operand, in parentheses where it binds less strongly than its place asks for. */
function at({ ours, level }: Both, needed: number): string {
  return level >= needed ? ours : `(${ours})`;
}

function infix(ours: string, js: string, level: number, a: Both, b: Both): Both {
  return both(`${at(a, level)} ${ours} ${at(b, level + 1)}`, `(${a.js} ${js} ${b.js})`, level);
}

function power(a: Both, b: Both): Both {
  return both(`${at(a, 9)}^${at(b, 7)}`, `pow(${a.js}, ${b.js})`, 8);
}

function logical(ours: string, js: string, level: number, a: Both, b: Both): Both {
  const text = `${at(a, level)} ${ours} ${at(b, level + 1)}`;
  return both(text, `(truth(${a.js}) ${js} truth(${b.js}) ? 1 : 0)`, level);
}

function chain(first: Both, rest: readonly (readonly [string, Both])[]): Both {
  const operands = [first, ...rest.map(([, operand]) => operand)];
  const ours = rest.map(([operator, operand]) => ` ${operator} ${at(operand, 5)}`).join('');
  const pairs = rest.map(([operator], i) => compared(operator, operands[i].js, operands[i + 1].js));
  return both(at(first, 5) + ours, `(${pairs.join(' && ')} ? 1 : 0)`, 4);
}

function compared(operator: string, a: string, b: string): string {
  if (operator === '==') return `(${a} === ${b})`;
  // An absent value is not different, it is absent.
  if (operator === '!=') return `(${a} < ${b} || ${a} > ${b})`;
  return `(${a} ${operator} ${b})`;
}

function call(name: string, operands: readonly Both[]): Both {
  const list = (texts: readonly string[]): string => texts.join(', ');
  return both(
    `${name}(${list(operands.map((o) => o.ours))})`,
    `Math.${name}(${list(operands.map((o) => o.js))})`,
    9,
  );
}
