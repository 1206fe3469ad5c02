import { readdirSync, readFileSync } from 'node:fs';
import { builtinModules } from 'node:module';
import { dirname, join, posix, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

/** Who may import whom, what may stand at the top level, how long a file may be: the design, enforced. */

const root = resolve(dirname(fileURLToPath(import.meta.url)), '..');
const ROOMS = ['orchestrator', 'workers', 'dashboard'];

interface Import {
  readonly from: string;
  /** Path from the root without ending for our own files, otherwise the package or node: module. */
  readonly to: string;
  readonly type: boolean;
}

function filesBelow(folder: string, ending: RegExp): string[] {
  return readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
    .filter((name) => ending.test(name))
    .map((name) => posix.join(folder, name.replaceAll('\\', '/')))
    .sort();
}

function importsOf(file: string): Import[] {
  const source = ts.createSourceFile(
    file,
    readFileSync(join(root, file), 'utf8'),
    ts.ScriptTarget.Latest,
    true,
  );
  const found: Import[] = [];
  const add = (specifier: ts.Node, type: boolean) => {
    if (ts.isStringLiteral(specifier)) found.push({ from: file, to: target(file, specifier.text), type });
  };
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node)) add(node.moduleSpecifier, node.importClause?.isTypeOnly ?? false);
    if (ts.isExportDeclaration(node) && node.moduleSpecifier) add(node.moduleSpecifier, node.isTypeOnly);
    if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword)
      add(node.arguments[0], false);
    ts.forEachChild(node, visit);
  };
  visit(source);
  return found;
}

function target(file: string, specifier: string): string {
  if (!specifier.startsWith('.')) return specifier;
  return posix.join(posix.dirname(file), specifier).replace(/\.js$/, '');
}

const sources = ROOMS.flatMap((room) => filesBelow(room, /\.ts$/));
const imports = sources.flatMap(importsOf);
const isOwn = (to: string) => ROOMS.some((room) => to === room || to.startsWith(`${room}/`));
const isNode = (to: string) => to.startsWith('node:') || builtinModules.includes(to);
const from = (...prefixes: string[]) => imports.filter((i) => prefixes.some((p) => i.from.startsWith(p)));
const complain = (list: Import[]) => list.map((i) => `${i.from} imports ${i.type ? 'type ' : ''}${i.to}`);
const inside =
  (...allowed: string[]) =>
  (to: string) =>
    allowed.some((a) => (a.endsWith('/') ? to.startsWith(a) : to === a));

describe('who may import whom', () => {
  it('numerics imports itself only; expressions itself and the pure maths it computes with', () => {
    const maths = inside('workers/numerics/');
    const own = inside('workers/expressions/', 'workers/numerics/');
    expect(complain(from('workers/numerics/').filter((i) => !maths(i.to)))).toEqual([]);
    expect(complain(from('workers/expressions/').filter((i) => !own(i.to)))).toEqual([]);
  });

  it('workers import workers only: no package, and no node: module but worker_threads in the entry', () => {
    const ok = (i: Import) =>
      i.to.startsWith('workers/') || (i.from === 'workers/entry.ts' && i.to === 'node:worker_threads');
    expect(complain(from('workers/').filter((i) => !ok(i)))).toEqual([]);
  });

  it('the store imports provenance, its trouble, what expressions and blocks are, and the driver', () => {
    const ok = inside(
      'orchestrator/store/',
      'orchestrator/provenance/',
      'orchestrator/mistakes',
      'workers/expressions/',
      'workers/contract',
      'better-sqlite3',
    );
    const allowed = (i: Import) => ok(i.to) || isNode(i.to) || (i.type && i.to === 'orchestrator/scan/plan');
    expect(complain(from('orchestrator/store/').filter((i) => !allowed(i)))).toEqual([]);
  });

  it('the rest of the orchestrator sees of the workers only contract, catalogues, evaluation, numerics and expressions', () => {
    const ok = inside(
      'workers/contract',
      'workers/models/catalogue',
      'workers/constraints/catalogue',
      'workers/evaluate',
      'workers/judge',
      'workers/quantities',
      'workers/numerics/',
      'workers/expressions/',
    );
    const wrong = from('orchestrator/').filter((i) => i.to.startsWith('workers/') && !ok(i.to));
    expect(complain(wrong)).toEqual([]);
  });

  it('sampling and scan files are pure: of node: modules only the hash, no store', () => {
    const ok = inside('orchestrator/scan/', 'orchestrator/sampling/', 'orchestrator/provenance/', 'workers/');
    const wrong = from('orchestrator/scan/', 'orchestrator/sampling/').filter(
      (i) =>
        (isOwn(i.to) && !ok(i.to) && i.to !== 'orchestrator/mistakes') ||
        (isNode(i.to) && i.to !== 'node:crypto'),
    );
    expect(complain(wrong)).toEqual([]);
  });

  it('the dashboard imports itself and the read side of the store and the commands as types', () => {
    const types = inside(
      'orchestrator/store/reading',
      'orchestrator/store/records',
      'orchestrator/scan/plan',
      'workers/contract',
    );
    const ok = (i: Import) =>
      i.to.startsWith('dashboard/') ||
      i.to === 'orchestrator/mistakes' ||
      (types(i.to) && i.type) ||
      (i.to.startsWith('orchestrator/commands/') && i.type);
    expect(complain(from('dashboard/').filter((i) => isOwn(i.to) && !ok(i)))).toEqual([]);
  });

  it('plots import themselves only', () => {
    const wrong = from('dashboard/plots/').filter((i) => isOwn(i.to) && !i.to.startsWith('dashboard/plots/'));
    expect(complain(wrong)).toEqual([]);
  });

  it('nobody imports the dashboard but cli.ts, and commands the type they implement', () => {
    const ok = (i: Import) =>
      i.from === 'orchestrator/cli.ts' ||
      (i.type && i.to === 'dashboard/commands' && i.from.startsWith('orchestrator/commands/'));
    const wrong = imports.filter(
      (i) => i.to.startsWith('dashboard/') && !i.from.startsWith('dashboard/') && !ok(i),
    );
    expect(complain(wrong)).toEqual([]);
  });

  it('nobody imports the terminal but cli.ts, nor cli.ts at all', () => {
    const wrong = imports.filter(
      (i) =>
        i.to === 'orchestrator/cli' ||
        (i.to.startsWith('orchestrator/terminal/') &&
          i.from !== 'orchestrator/cli.ts' &&
          !i.from.startsWith('orchestrator/terminal/')),
    );
    expect(complain(wrong)).toEqual([]);
  });

  it.each([
    ['better-sqlite3', ['orchestrator/store/']],
    ['bullmq', ['orchestrator/dispatch/']],
    ['ioredis', ['orchestrator/dispatch/']],
    ['commander', ['orchestrator/cli.ts', 'orchestrator/terminal/']],
    ['yaml', ['orchestrator/scan/']],
    ['zod', ['orchestrator/scan/']],
    ['express', ['dashboard/']],
    ['helmet', ['dashboard/']],
    ['hyparquet-writer', ['orchestrator/export/']],
  ])('%s is known to one room', (name, rooms) => {
    const wrong = imports.filter((i) => i.to === name && !rooms.some((room) => i.from.startsWith(room)));
    expect(complain(wrong)).toEqual([]);
  });

  it('imports no package that package.json does not pin as a dependency', () => {
    const { dependencies } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as {
      dependencies: Record<string, string>;
    };
    const packages = imports.filter((i) => !isOwn(i.to) && !isNode(i.to));
    const name = (to: string) =>
      to
        .split('/')
        .slice(0, to.startsWith('@') ? 2 : 1)
        .join('/');
    const known = (i: Import) => name(i.to) in dependencies || i.type;
    expect(complain(packages.filter((i) => !known(i)))).toEqual([]);
    for (const version of Object.values(dependencies)) expect(version).toMatch(/^\d+\.\d+\.\d+$/);
  });

  it('has no cycle between files', () => {
    const graph = new Map(
      sources.map((file) => [
        file,
        importsOf(file)
          .filter((i) => !i.type && isOwn(i.to))
          .map((i) => `${i.to}.ts`),
      ]),
    );
    expect(cycleIn(graph)).toEqual([]);
  });
});

function cycleIn(graph: ReadonlyMap<string, readonly string[]>): string[] {
  const done = new Set<string>();
  const walk = (file: string, path: string[]): string[] => {
    if (path.includes(file)) return [...path.slice(path.indexOf(file)), file];
    if (done.has(file)) return [];
    for (const next of graph.get(file) ?? []) {
      const cycle = walk(next, [...path, file]);
      if (cycle.length > 0) return cycle;
    }
    done.add(file);
    return [];
  };
  for (const file of graph.keys()) {
    const cycle = walk(file, []);
    if (cycle.length > 0) return cycle;
  }
  return [];
}

/** The text of a file without comments, so that a rule may be named in one. */
function codeOf(file: string): string {
  const text = readFileSync(join(root, file), 'utf8');
  return text.replace(/\/\*[\s\S]*?\*\//g, '').replace(/(^|\s)\/\/.*$/gm, '');
}

describe('what code may touch', () => {
  const matching = (files: string[], pattern: RegExp) => files.filter((file) => pattern.test(codeOf(file)));

  it('argv and environment are read in cli.ts alone', () => {
    const others = sources.filter((file) => file !== 'orchestrator/cli.ts');
    expect(matching(others, /process\.(argv|env)\b/)).toEqual([]);
  });

  it('no physics reads a clock, the network or unseeded randomness', () => {
    const physics = sources.filter((file) => file.startsWith('workers/') && file !== 'workers/entry.ts');
    expect(
      matching(physics, /\bDate\b|\bperformance\b|Math\.random|\bfetch\(|\bprocess\b|\brequire\(/),
    ).toEqual([]);
  });

  it('what enters a result uses + - * / and sqrt only: the engine’s other functions differ between machines', () => {
    const results = sources.filter((file) => /^workers\/|^orchestrator\/sampling\//.test(file));
    const inexact =
      /Math\.(exp|expm1|log|log2|log10|log1p|pow|cbrt|sin|cos|tan|asin|acos|atan|atan2|sinh|cosh|tanh|hypot)\b/;
    expect(matching(results, inexact)).toEqual([]);
  });

  it('no code is generated from text', () => {
    expect(matching(sources, /new Function\b|\beval\(/)).toEqual([]);
  });
});

describe('what stands where', () => {
  it('the top level is fixed', () => {
    const allowed = [
      ...['package.json', 'package-lock.json', 'tsconfig.json', 'docker-compose.yml'],
      ...['README.md', 'DEVELOPERS.md', 'LICENSE', 'CHANGELOG.md'],
      ...['orchestrator', 'workers', 'dashboard', 'test', 'scans'],
      ...['node_modules', 'dist'],
    ];
    const ignored = /^\.|\.sqlite(-wal|-shm|-journal)?$/;
    const entries = readdirSync(root).filter((name) => !ignored.test(name));
    expect(entries.filter((name) => !allowed.includes(name))).toEqual([]);
  });

  it('no source file outside test/ is longer than 300 lines', () => {
    const files = ROOMS.flatMap((room) => filesBelow(room, /\.(ts|js|mjs|css|html)$/));
    const long = files.filter((file) => readFileSync(join(root, file), 'utf8').split('\n').length > 301);
    expect(long).toEqual([]);
  });
});
