import { compile, ExpressionError } from '../../workers/expressions/compile.js';
import { RESERVED } from '../../workers/expressions/syntax.js';
import { entriesOf } from './entries.js';
import { check, numberHint } from './check.js';
import type { Path } from './path.js';
import { didYouMean, quote } from './phrases.js';
import type { Plan } from './plan.js';
import type { Report } from './report.js';
import { DEFINED_NAME, expression } from './shape.js';

/** Columns that every run has besides its inputs, definitions and quantities. */
const POINT_COLUMNS = ['stratum', 'index', 'verdict', 'failure'];

const MOST_DEFINITIONS = 200;

interface Definition {
  readonly name: string;
  readonly expression: string;
  /** Names it reads and where its text, as it stands in the file, has them first. */
  readonly needs: ReadonlyMap<string, number>;
}

export interface Vocabulary {
  readonly inputs: ReadonlySet<string>;
  readonly quantities: ReadonlySet<string>;
}

/** The `define` section, sorted so that each definition needs only earlier ones (and otherwise by name).
 *  A definition that bears the name of an input sets that input. */
export function readDefinitions(raw: unknown, words: Vocabulary, report: Report): Plan['define'] {
  const path = ['define'];
  const found = new Map<string, Definition>();
  const entries = entriesOf(raw, 'a mapping of names to expressions', path, report);
  if (entries.length > MOST_DEFINITIONS) {
    report.value(path, {
      expected: `at most ${MOST_DEFINITIONS} definitions`,
      found: String(entries.length),
    });
    return [];
  }
  const names = new Set([...words.inputs, ...entries.map(([name]) => name)]);
  for (const [name, text] of entries) {
    checkName(name, words, path, report);
    const definition = readDefinition(name, text, [...path, name], report);
    if (definition && knowsItsNames(definition, names, words, path, report)) found.set(name, definition);
  }
  return inOrderOfNeed(found, path, report).map(({ name, expression: text }) => ({ name, expression: text }));
}

function checkName(name: string, { quantities }: Vocabulary, path: Path, report: Report): void {
  const at = [...path, name];
  if (!DEFINED_NAME.test(name)) {
    report.key(at, {
      expected: 'a name of letters and digits that begins with a letter',
      found: quote(name),
    });
  } else if (RESERVED.has(name) || POINT_COLUMNS.includes(name)) {
    report.key(at, {
      expected: 'a name of your own',
      found: `${quote(name)}, a word of the expression language`,
    });
  } else if (quantities.has(name)) {
    report.key(at, { expected: 'a name of your own', found: `${quote(name)}, a quantity of the model` });
  }
}

function readDefinition(name: string, raw: unknown, path: Path, report: Report): Definition | undefined {
  const text =
    typeof raw === 'number' && Number.isFinite(raw) ? String(raw) : check(expression, raw, path, report);
  if (text === undefined) return undefined;
  try {
    return { name, expression: text.trim().replace(/\s+/g, ' '), needs: compile(text).positions };
  } catch (error) {
    if (!(error instanceof ExpressionError)) throw error;
    const hint = numberHint(text);
    report.value(
      path,
      { expected: error.expected, found: error.found, ...(hint ? { hint } : {}) },
      error.position,
    );
    return undefined;
  }
}

function knowsItsNames(
  { name, needs }: Definition,
  names: ReadonlySet<string>,
  { quantities }: Vocabulary,
  path: Path,
  report: Report,
): boolean {
  const unknown = [...needs].filter(([needed]) => !names.has(needed));
  for (const [needed, position] of unknown) {
    const hint = quantities.has(needed)
      ? 'a quantity is known only after the point is evaluated'
      : didYouMean(needed, names);
    const expected = 'an input or another definition';
    report.value([...path, name], { expected, found: quote(needed), ...(hint ? { hint } : {}) }, position);
  }
  return unknown.length === 0;
}

function inOrderOfNeed(all: ReadonlyMap<string, Definition>, path: Path, report: Report): Definition[] {
  const waiting = new Map([...all].sort(([a], [b]) => (a < b ? -1 : 1)));
  const done: Definition[] = [];
  for (let ready = true; ready && waiting.size > 0;) {
    ready = false;
    for (const [name, definition] of waiting) {
      if ([...definition.needs.keys()].some((needed) => waiting.has(needed))) continue;
      waiting.delete(name);
      done.push(definition);
      ready = true;
      break;
    }
  }
  for (const circle of circlesOf(waiting)) {
    const at = [...path, circle[0]];
    const position = waiting.get(circle[0])?.needs.get(circle[1] ?? circle[0]) ?? 0;
    report.value(
      at,
      { expected: 'definitions without a circle', found: [...circle, circle[0]].join(' -> ') },
      position,
    );
  }
  return done;
}

/** Each circle among definitions once, beginning with its first name. */
function circlesOf(waiting: ReadonlyMap<string, Definition>): string[][] {
  const circles = new Map<string, string[]>();
  for (const start of waiting.keys()) {
    const walk: string[] = [];
    let at: string | undefined = start;
    while (at !== undefined && !walk.includes(at)) {
      walk.push(at);
      at = [...(waiting.get(at)?.needs.keys() ?? [])].find((needed) => waiting.has(needed));
    }
    if (at === undefined) continue;
    const circle = walk.slice(walk.indexOf(at));
    const first = circle.indexOf([...circle].sort()[0]);
    const turned = [...circle.slice(first), ...circle.slice(0, first)];
    circles.set(turned[0], turned);
  }
  return [...circles.values()];
}
