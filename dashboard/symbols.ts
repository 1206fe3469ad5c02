import { html, raw, type Safe } from './html.js';
import { plainText, type Label, type Span } from './plots/label.js';

/** Reads the small TeX subset of symbols and formulas: letters, \greek, _{}, ^{}, \mathrm{}, \log_{10}, \frac, \sqrt.
 *  Never throws: what it does not know is shown as it stands, upright. */
export function parseSymbol(tex: string): Label {
  const reader = { text: tex.slice(0, 500), at: 0 };
  return merge(readRun(reader, { level: 0, upright: false, depth: 0 }));
}

export function symbolHtml(tex: string): Safe {
  return html`<span class="math">${raw(parseSymbol(tex).map(spanHtml).join(''))}</span>`;
}

/** The symbol in one line of Unicode text, for options of a list and for screen readers. */
export function symbolText(tex: string): string {
  return plainText(parseSymbol(tex));
}

/** A unit with its powers raised: "GeV^2" or "GeV". Nothing for the unit of a pure number. */
export function unitLabel(unit: string): Label {
  return unit === '1' || unit === '' ? [] : parseSymbol(`\\mathrm{${unit.replace(/\^(-?\d+)/g, '^{$1}')}}`);
}

export function unitHtml(unit: string): Safe {
  return raw(unitLabel(unit).map(spanHtml).join(''));
}

interface Reader {
  readonly text: string;
  at: number;
}
interface Style {
  readonly level: -1 | 0 | 1;
  readonly upright: boolean;
  readonly depth: number;
}

function spanHtml(span: Span): string {
  const inner = span.italic ? html`<i>${span.text}</i>` : html`${span.text}`;
  if (span.level === 0) return inner.text;
  return span.level === 1 ? html`<sup>${inner}</sup>`.text : html`<sub>${inner}</sub>`.text;
}

function readRun(reader: Reader, style: Style): Span[] {
  const spans: Span[] = [];
  while (reader.at < reader.text.length && reader.text[reader.at] !== '}') {
    const character = reader.text[reader.at++];
    if (character === '_' || character === '^') {
      const level = character === '_' ? -1 : 1;
      spans.push(...readArgument(reader, { ...style, level: style.level === 0 ? level : style.level }));
    } else if (character === '\\') spans.push(...readCommand(reader, style));
    else if (character === '{') spans.push(...readGroup(reader, style));
    else if (character === '~') spans.push(span('\u00a0', style, false));
    else if (character === '-' && style.upright && betweenLetters(reader)) spans.push(upright('-', style));
    else if (character !== ' ' || style.upright) spans.push(span(character, style, isLetter(character)));
  }
  return spans;
}

function readGroup(reader: Reader, style: Style): Span[] {
  if (style.depth > 12) return [];
  const spans = readRun(reader, { ...style, depth: style.depth + 1 });
  if (reader.text[reader.at] === '}') reader.at++;
  return spans;
}

function readArgument(reader: Reader, style: Style): Span[] {
  while (reader.text[reader.at] === ' ') reader.at++;
  const character = reader.text[reader.at];
  if (character === undefined || character === '}') return [];
  reader.at++;
  if (character === '{') return readGroup(reader, style);
  if (character === '\\') return readCommand(reader, style);
  return [span(character, style, isLetter(character))];
}

function readCommand(reader: Reader, style: Style): Span[] {
  const name = /^(?:[A-Za-z]+|.)/.exec(reader.text.slice(reader.at))?.[0] ?? '';
  reader.at += name.length;
  if (/^[A-Za-z]/.test(name)) while (reader.text[reader.at] === ' ') reader.at++;
  if (UPRIGHT.has(name)) return readArgument(reader, { ...style, upright: true });
  if (name === 'frac') return fraction(readArgument(reader, style), readArgument(reader, style), style);
  if (name === 'sqrt') {
    return [span('√', style, false), ...grouped(readArgument(reader, style), style)];
  }
  if (name in ACCENTS) return accented(readArgument(reader, style), ACCENTS[name]);
  if (name in GREEK) return [span(GREEK[name], style, name[0] === name[0].toLowerCase())];
  if (name in SIGNS) return [span(SIGNS[name], style, false)];
  return [span(name, style, false)];
}

/** A hyphen in a word is no minus sign. */
function betweenLetters({ text, at }: Reader): boolean {
  return isLetter(text[at - 2] ?? '') && isLetter(text[at] ?? '');
}

function upright(text: string, style: Style): Span {
  return { text, italic: false, level: style.level };
}

function span(text: string, style: Style, italic: boolean): Span {
  return { text: SPACED[text] ?? text, italic: italic && !style.upright, level: style.level };
}

function fraction(above: Span[], below: Span[], style: Style): Span[] {
  return [...grouped(above, style), span('/', style, false), ...grouped(below, style)];
}

/** Brackets where a linear fraction or root would otherwise change its meaning. */
function grouped(spans: Span[], style: Style): Span[] {
  const simple = spans.length <= 1 || spans.every((part) => /^[\p{L}\p{N}.]*$/u.test(part.text));
  return simple ? spans : [span('(', style, false), ...spans, span(')', style, false)];
}

function accented(spans: Span[], mark: string): Span[] {
  return spans.map((part) => ({ ...part, text: [...part.text].map((letter) => letter + mark).join('') }));
}

function merge(spans: readonly Span[]): Label {
  const merged: Span[] = [];
  for (const next of spans) {
    const last = merged.at(-1);
    if (last && last.italic === next.italic && last.level === next.level) {
      merged[merged.length - 1] = { ...last, text: last.text + next.text };
    } else merged.push(next);
  }
  return merged;
}

function isLetter(character: string): boolean {
  return /\p{L}/u.test(character);
}

const UPRIGHT = new Set(['mathrm', 'text', 'rm', 'operatorname']);
const ACCENTS: Readonly<Record<string, string>> = {
  bar: '\u0304',
  overline: '\u0304',
  hat: '\u0302',
  tilde: '\u0303',
};
const GREEK: Readonly<Record<string, string>> = Object.fromEntries(
  (
    'alpha α,beta β,gamma γ,delta δ,epsilon ε,varepsilon ε,zeta ζ,eta η,theta θ,kappa κ,lambda λ,mu μ,nu ν,xi ξ,' +
    'pi π,rho ρ,sigma σ,tau τ,phi φ,varphi φ,chi χ,psi ψ,omega ω,Gamma Γ,Delta Δ,Theta Θ,Lambda Λ,Xi Ξ,Pi Π,' +
    'Sigma Σ,Phi Φ,Psi Ψ,Omega Ω,ell ℓ'
  )
    .split(',')
    .map((pair) => pair.split(' ') as [string, string]),
);
const SIGNS: Readonly<Record<string, string>> = {
  log: 'log',
  ln: 'ln\u2009',
  exp: 'exp',
  min: 'min',
  max: 'max',
  arg: 'arg',
  le: ' ≤ ',
  leq: ' ≤ ',
  ge: ' ≥ ',
  geq: ' ≥ ',
  lt: ' < ',
  gt: ' > ',
  ne: ' ≠ ',
  sim: ' ~ ',
  approx: ' ≈ ',
  times: ' × ',
  cdot: ' · ',
  pm: ' ± ',
  in: ' ∈ ',
  infty: '∞',
  dagger: '†',
  prime: '′',
  int: '∫',
  sum: '∑',
  to: ' → ',
  left: '',
  right: '',
  quad: '\u2003',
  ',': '\u2009',
  ';': '\u2009',
  ' ': ' ',
  '%': '%',
  '{': '{',
  '}': '}',
};
const SPACED: Readonly<Record<string, string>> = {
  '-': '−',
  '<': ' < ',
  '>': ' > ',
  '=': ' = ',
  '+': ' + ',
  ',': ', ',
  '*': '·',
};
