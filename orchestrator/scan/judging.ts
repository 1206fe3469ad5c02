import type { Constraint, ConstraintUse, Options, OptionSpec } from '../../workers/contract.js';
import { check, unknownKeys } from './check.js';
import { entriesOf, isMapping } from './entries.js';
import type { Path } from './path.js';
import { didYouMean, quote } from './phrases.js';
import type { Report } from './report.js';
import { optionsOf } from './shape.js';

export interface Judging {
  readonly require: ConstraintUse[];
  readonly note: ConstraintUse[];
}

/** `require` and `note`: lists of constraints, each a name or { name: options }. */
export function readJudging(
  sections: { require: unknown; note: unknown },
  constraints: ReadonlyMap<string, Constraint>,
  report: Report,
): Judging {
  const seen = new Map<string, string>();
  const read = (section: 'require' | 'note'): ConstraintUse[] => {
    const raw = sections[section] ?? [];
    if (!Array.isArray(raw)) {
      const hint = typeof raw === 'string' ? `write [${raw.slice(0, 40)}]` : undefined;
      const expected = 'a list of constraints';
      report.value([section], {
        expected,
        found: report.describe([section], raw),
        ...(hint ? { hint } : {}),
      });
      return [];
    }
    const uses = raw.map((entry, i) => readUse(entry, [section, i], constraints, report));
    return uses.filter(
      (use, i): use is ConstraintUse => use !== undefined && isFirst(use, [section, i], seen, report),
    );
  };
  return { require: read('require'), note: read('note') };
}

function readUse(
  raw: unknown,
  path: Path,
  constraints: ReadonlyMap<string, Constraint>,
  report: Report,
): ConstraintUse | undefined {
  if (typeof raw === 'string') {
    const constraint = constraints.get(raw);
    if (constraint) return { name: raw, options: defaultsOf(constraint.options) };
    const hint = didYouMean(raw, constraints.keys());
    const expected = `one of ${[...constraints.keys()].join(', ')}`;
    report.value(path, { expected, found: quote(raw), ...(hint ? { hint } : {}) });
    return undefined;
  }
  const entries = entriesOf(raw ?? null, 'a name of a constraint or { name: options }', path, report);
  if (entries.length !== 1) {
    if (isMapping(raw))
      report.value(path, { expected: 'one constraint an entry', found: report.describe(path, raw) });
    return undefined;
  }
  const [name, options] = entries[0];
  const constraint = constraints.get(name);
  if (!constraint) unknownKeys([name], [...constraints.keys()], path, report);
  const read = constraint && readOptions(options, constraint.options, [...path, name], report);
  return read && { name, options: read };
}

/** A constraint decides or is noted once: with other options it would be another run. */
function isFirst(use: ConstraintUse, path: Path, seen: Map<string, string>, report: Report): boolean {
  const before = seen.get(use.name);
  if (before === undefined) seen.set(use.name, path.join('.'));
  else
    report.value(path, {
      expected: 'every constraint once',
      found: `${use.name} again, also under ${before.split('.')[0]}`,
    });
  return before === undefined;
}

/** Options with their defaults filled in; undefined after complaining. */
export function readOptions(
  raw: unknown,
  specs: Readonly<Record<string, OptionSpec>>,
  path: Path,
  report: Report,
): Options | undefined {
  const found = check(optionsOf(specs), raw ?? {}, path, report);
  return found && { ...defaultsOf(specs), ...(found as Options) };
}

export function defaultsOf(specs: Readonly<Record<string, OptionSpec>>): Options {
  return Object.fromEntries(Object.entries(specs).map(([name, spec]) => [name, spec.default]));
}
