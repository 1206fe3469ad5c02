import { ExpressionError } from './expression-error.js';
import { COMPARISONS, CONSTRAINT_COLUMNS, FUNCTIONS, OUTCOME_TESTS, VERDICT_TESTS } from './syntax.js';
import type { BinaryOperator, Comparison, Expression, FunctionName } from './syntax.js';
import { quoted, Tokenizer } from './tokenizer.js';
import type { Token } from './tokenizer.js';

export const LONGEST = 2000;
export const DEEPEST = 64;

/** Text to syntax tree by operator precedence, weakest first:
 *  `or`, `and`, `not`, comparisons (chains allowed), `+ -`, `* /`, sign, `^` (right associative, so -x^2 is -(x^2)).
 *  @throws ExpressionError with the position of the first mistake
 *  Source: V. R. Pratt, Top down operator precedence, POPL 1973, doi:10.1145/512927.512931 */
export function parse(text: string): Expression {
  if (text.length > LONGEST) {
    throw new ExpressionError(LONGEST, `at most ${LONGEST} characters`, `${text.length} characters`);
  }
  return new Parser(text).whole();
}

const OR = 1;
const AND = 2;
const NOT = 3;
const COMPARE = 4;
const SUM = 5;
const PRODUCT = 6;
const SIGN = 7;
const POWER = 8;

/** Binding power of what may follow an operand; anything else ends the operand. */
const STRENGTH: ReadonlyMap<string, number> = new Map([
  ['or', OR],
  ['and', AND],
  ...COMPARISONS.map((operator) => [operator, COMPARE] as const),
  ['+', SUM],
  ['-', SUM],
  ['*', PRODUCT],
  ['/', PRODUCT],
  ['^', POWER],
]);

class Parser {
  private readonly tokens: Tokenizer;
  private token: Token;
  private depth = 0;

  constructor(text: string) {
    this.tokens = new Tokenizer(text);
    this.token = this.tokens.next();
  }

  whole(): Expression {
    const expression = this.expression(0);
    if (this.token.kind !== 'end') throw this.mistake('an operator or the end');
    return expression;
  }

  /** An operand and every operator after it that binds more strongly than `floor`. */
  private expression(floor: number): Expression {
    if (++this.depth > DEEPEST) throw this.mistake(`at most ${DEEPEST} levels of nesting`, 'more');
    let left = this.operand(floor);
    let strength = this.strength();
    while (strength > floor) {
      left = strength === COMPARE ? this.chain(left) : this.binary(left, strength);
      strength = this.strength();
    }
    this.depth--;
    return left;
  }

  private strength(): number {
    return this.token.kind === 'number' ? 0 : (STRENGTH.get(this.token.text) ?? 0);
  }

  private binary(left: Expression, strength: number): Expression {
    const operator = this.take().text as BinaryOperator;
    const right = this.expression(operator === '^' ? POWER - 1 : strength);
    return { kind: 'binary', operator, left, right };
  }

  private chain(first: Expression): Expression {
    const operators: Comparison[] = [];
    const operands = [first];
    while (this.strength() === COMPARE) {
      operators.push(this.take().text as Comparison);
      operands.push(this.expression(COMPARE));
    }
    return { kind: 'chain', operators, operands };
  }

  private operand(floor: number): Expression {
    const { kind, text } = this.token;
    if (kind === 'number') return { kind: 'number', value: Number(this.take().text) };
    if (kind === 'word') return text === 'not' ? this.not(floor) : this.word();
    if (text === '-') return this.unary('-', SIGN);
    if (text === '+') return this.signed();
    if (text === '(') return this.parenthesis();
    throw this.mistake('a number, a name or a parenthesis');
  }

  private unary(operator: '-' | 'not', strength: number): Expression {
    this.take();
    return { kind: 'unary', operator, operand: this.expression(strength) };
  }

  /** `1 + not x < 2` could mean two things. */
  private not(floor: number): Expression {
    if (floor >= COMPARE) throw this.mistake("parentheses around 'not'");
    return this.unary('not', NOT);
  }

  private signed(): Expression {
    this.take();
    return this.expression(SIGN);
  }

  private parenthesis(): Expression {
    this.take();
    const inner = this.expression(0);
    this.close();
    return inner;
  }

  private word(): Expression {
    const { text, position } = this.token;
    if (text === 'and' || text === 'or') throw this.mistake('a number, a name or a parenthesis');
    this.take();
    if (text === 'pi') return { kind: 'number', value: Math.PI };
    if (isFunction(text)) return this.call(text, position);
    const verdict = VERDICT_TESTS.get(text);
    if (verdict !== undefined) return equals({ kind: 'column', key: 'verdict', position }, verdict);
    return this.constraintColumn(text, position) ?? this.plainColumn(text, position);
  }

  private plainColumn(key: string, position: number): Expression {
    if (!this.at('(')) return { kind: 'column', key, position };
    throw new ExpressionError(position, `one of the functions ${FUNCTIONS.join(', ')}`, quoted(key));
  }

  private constraintColumn(word: string, position: number): Expression | undefined {
    const outcome = OUTCOME_TESTS.get(word);
    const plain = CONSTRAINT_COLUMNS.some((name) => name === word);
    if (outcome === undefined && !plain) return undefined;
    if (!this.at('(')) throw this.mistake(`'(' and the name of a constraint after ${word}`);
    const name = this.tokens.constraintName();
    this.take();
    this.close();
    if (outcome === undefined) return { kind: 'column', key: `${word}(${name})`, position };
    return equals({ kind: 'column', key: `outcome(${name})`, position }, outcome);
  }

  private call(name: FunctionName, position: number): Expression {
    if (!this.at('(')) throw this.mistake(`'(' after ${name}`);
    const values: Expression[] = [];
    do {
      this.take();
      values.push(this.expression(0));
    } while (this.at(','));
    this.close();
    const several = name === 'min' || name === 'max';
    if (several ? values.length >= 2 : values.length === 1) return { kind: 'call', name, arguments: values };
    const wanted = several ? 'two or more arguments' : 'one argument';
    throw new ExpressionError(position, `${wanted} of ${name}`, `${values.length}`);
  }

  private close(): void {
    if (!this.at(')')) throw this.mistake("')'");
    this.take();
  }

  private at(symbol: string): boolean {
    return this.token.text === symbol;
  }

  private take(): Token {
    const taken = this.token;
    this.token = this.tokens.next();
    return taken;
  }

  private mistake(expected: string, found?: string): ExpressionError {
    const { kind, text, position } = this.token;
    return new ExpressionError(position, expected, found ?? (kind === 'end' ? 'the end' : quoted(text)));
  }
}

function isFunction(word: string): word is FunctionName {
  return FUNCTIONS.some((name) => name === word);
}

function equals(column: Expression, value: number): Expression {
  return { kind: 'chain', operators: ['=='], operands: [column, { kind: 'number', value }] };
}
