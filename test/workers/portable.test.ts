/** What lets results be the same bits on every machine: no function whose last bits differ between platforms, no
 *  clock, no randomness, nothing from outside workers/ (only + - * / and sqrt are exact by IEEE 754). */
import { readdirSync, readFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const workers = fileURLToPath(new URL('../../workers', import.meta.url));
/** The thread around the physics: it alone may speak to node. */
const ENTRY = 'entry.ts';

const EXACT_MATH = new Set([
  'abs',
  'sqrt',
  'min',
  'max',
  'floor',
  'ceil',
  'trunc',
  'sign',
  'imul',
  'clz32',
  'fround',
]);
const EXACT_CONSTANTS = new Set(['E', 'LN2', 'LN10', 'LOG2E', 'LOG10E', 'PI', 'SQRT2', 'SQRT1_2']);
const FORBIDDEN = new Set([
  ...[
    'Date',
    'performance',
    'process',
    'globalThis',
    'crypto',
    'eval',
    'Function',
    'Intl',
    'fetch',
    'require',
  ],
  ...[
    'setTimeout',
    'setInterval',
    'setImmediate',
    'queueMicrotask',
    'Buffer',
    'navigator',
    'WeakRef',
    'Atomics',
  ],
]);
const LOCALE = /^toLocale|^localeCompare$/;

function filesBelow(folder: string): string[] {
  return readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((name) => name.endsWith('.ts'))
    .sort();
}

/** Every place of a source text that could make a result differ from one machine or moment to the next. */
function impurities(text: string, file: string): string[] {
  const source = ts.createSourceFile(file, text, ts.ScriptTarget.Latest, true);
  const found: string[] = [];
  const report = (node: ts.Node, what: string): void => {
    const { line } = source.getLineAndCharacterOfPosition(node.getStart());
    found.push(`${file}:${line + 1} ${what}`);
  };
  const visit = (node: ts.Node): void => {
    const problem = problemOf(node, file);
    if (problem) report(node, problem);
    if (!ts.isTypeNode(node)) ts.forEachChild(node, visit);
  };
  visit(source);
  return found;
}

function problemOf(node: ts.Node, file: string): string | undefined {
  if (ts.isImportDeclaration(node) || ts.isExportDeclaration(node)) return foreignModule(node, file);
  if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword)
    return 'dynamic import';
  if (ts.isBinaryExpression(node)) return powerOperator(node);
  if (!ts.isIdentifier(node) || isOnlyAName(node)) return undefined;
  if (node.text === 'Math') return inexactMath(node);
  if (LOCALE.test(node.text)) return node.text;
  return FORBIDDEN.has(node.text) && !isProperty(node) ? node.text : undefined;
}

/** Math.f with f exact; Math in any other use (destructured, passed on, indexed) cannot be checked. */
function inexactMath(node: ts.Identifier): string | undefined {
  const { parent } = node;
  if (!ts.isPropertyAccessExpression(parent)) return 'Math used other than as Math.name';
  const name = parent.name.text;
  return EXACT_MATH.has(name) || EXACT_CONSTANTS.has(name) ? undefined : `Math.${name}`;
}

function powerOperator(node: ts.BinaryExpression): string | undefined {
  const kind = node.operatorToken.kind;
  const power =
    kind === ts.SyntaxKind.AsteriskAsteriskToken || kind === ts.SyntaxKind.AsteriskAsteriskEqualsToken;
  return power ? '**' : undefined;
}

function foreignModule(node: ts.ImportDeclaration | ts.ExportDeclaration, file: string): string | undefined {
  if (!node.moduleSpecifier || !ts.isStringLiteral(node.moduleSpecifier)) return undefined;
  const target = node.moduleSpecifier.text;
  const inside =
    target.startsWith('.') && !relative(workers, join(workers, file, '..', target)).startsWith('..');
  return inside ? undefined : `import of ${target}`;
}

/** The name of a property or of a key, not a use of the global of that name. */
function isProperty(node: ts.Identifier): boolean {
  const { parent } = node;
  if (ts.isPropertyAccessExpression(parent)) return parent.name === node;
  return (ts.isPropertyAssignment(parent) || ts.isPropertySignature(parent)) && parent.name === node;
}

/** `import.meta` and the like hold identifiers that name nothing. */
function isOnlyAName(node: ts.Identifier): boolean {
  return ts.isMetaProperty(node.parent);
}

describe('portable arithmetic', () => {
  const files = filesBelow(workers).filter((file) => file !== ENTRY);

  it('finds the physics', () => {
    expect(files).toContain(join('numerics', 'exp.ts'));
  });

  it.each(files)('%s has the same result on every machine and at every time', (file) => {
    expect(impurities(readFileSync(join(workers, file), 'utf8'), file)).toEqual([]);
  });
});

describe('the check itself', () => {
  it.each([
    ['const a = Math.exp(1);', 'Math.exp'],
    ['const a = Math.random();', 'Math.random'],
    ['const { pow } = Math;', 'Math used other than as Math.name'],
    ["const a = Math['pow'](2, 3);", 'Math used other than as Math.name'],
    ['const a = 2 ** 3;', '**'],
    ['let a = 2; a **= 3;', '**'],
    ['const a = Date.now();', 'Date'],
    ['const a = new Date();', 'Date'],
    ['const a = performance.now();', 'performance'],
    ['const a = process.hrtime();', 'process'],
    ["import fs from 'node:fs';", 'import of node:fs'],
    ["import { x } from 'zod';", 'import of zod'],
    ["export { x } from '../../orchestrator/mistakes.js';", 'import of ../../orchestrator/mistakes.js'],
    ["const a = await import('node:fs');", 'dynamic import'],
    ["const a = new Function('return 1');", 'Function'],
    ['const a = globalThis.Date;', 'globalThis'],
    ["const a = 'b'.localeCompare('a');", 'localeCompare'],
  ])('sees through %s', (text, problem) => {
    expect(impurities(text, 'numerics/example.ts')).toContain(`numerics/example.ts:1 ${problem}`);
  });

  it('leaves exact arithmetic alone', () => {
    const text = "import { exp } from '../numerics/exp.js';\nconst a = { process: Math.sqrt(2) / Math.PI };";
    expect(impurities(text, 'running/example.ts')).toEqual([]);
  });
});
