import { ExpressionError } from './expression-error.js';

export type TokenKind = 'number' | 'word' | 'symbol' | 'end';

export interface Token {
  readonly kind: TokenKind;
  readonly text: string;
  readonly position: number;
}

const SPACE = /[ \t\r\n]*/y;
const NUMBER = /(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?/y;
const WORD = /[A-Za-z][A-Za-z0-9_]*/y;
/** `**` is left out, so that it gets its own message. */
const SYMBOL = /<=|>=|==|!=|\*(?!\*)|[-+/^<>(),]/y;
const CONSTRAINT = /[a-z][a-z0-9]*(?:-[a-z0-9]+)*/y;

/** Reads tokens one at a time, because only the parser knows where a name with hyphens may stand. */
export class Tokenizer {
  private position = 0;

  constructor(private readonly text: string) {}

  next(): Token {
    this.match(SPACE);
    const position = this.position;
    if (position === this.text.length) return { kind: 'end', text: '', position };
    const number = this.match(NUMBER);
    if (number !== '') return this.checkedNumber(number, position);
    const word = this.match(WORD);
    if (word !== '') return { kind: 'word', text: word, position };
    const symbol = this.match(SYMBOL);
    if (symbol !== '') return { kind: 'symbol', text: symbol, position };
    throw this.unreadable(position);
  }

  /** The kebab-case name of a constraint. */
  constraintName(): string {
    this.match(SPACE);
    const position = this.position;
    const name = this.match(CONSTRAINT);
    if (name !== '') return name;
    throw new ExpressionError(position, 'the name of a constraint', described(this.text, position));
  }

  private match(pattern: RegExp): string {
    pattern.lastIndex = this.position;
    const text = pattern.exec(this.text)?.[0] ?? '';
    this.position += text.length;
    return text;
  }

  /** `12abc`, `1.2.3` and `1e999` are mistakes, not a number and something else. */
  private checkedNumber(text: string, position: number): Token {
    const tail = /[A-Za-z0-9_.]*/y;
    tail.lastIndex = this.position;
    const rest = tail.exec(this.text)?.[0] ?? '';
    if (rest !== '') throw new ExpressionError(position, 'a number', quoted(text + rest));
    if (isFinite(Number(text))) return { kind: 'number', text, position };
    throw new ExpressionError(position, 'a number below 1.8e308', quoted(text));
  }

  private unreadable(position: number): ExpressionError {
    const found = described(this.text, position);
    const character = this.text[position];
    if (character === '=') return new ExpressionError(position, "'==' to compare", found);
    if (character === '*') return new ExpressionError(position, "'^' for a power", "'**'");
    if (character === '&') return new ExpressionError(position, "'and'", found);
    if (character === '|') return new ExpressionError(position, "'or'", found);
    if (character === '!') return new ExpressionError(position, "'not' or '!='", found);
    return new ExpressionError(position, 'a number, a name, an operator or a parenthesis', found);
  }
}

/** The character at a position in words fit for a message: visible, or by its code point. */
function described(text: string, position: number): string {
  const point = text.codePointAt(position);
  if (point === undefined) return 'the end';
  const code = `U+${point.toString(16).toUpperCase().padStart(4, '0')}`;
  return point > 0x20 && point < 0x7f ? quoted(String.fromCodePoint(point)) : `the character ${code}`;
}

/** Text of the user in quotes, cut where it is long. */
export function quoted(text: string): string {
  return text.length > 40 ? `'${text.slice(0, 40)}...'` : `'${text}'`;
}
