import { canonicalJson } from '../provenance/canonical.js';
import type { Fingerprints } from '../store/records.js';

/** One thing in the provenance of two runs that is not the same. */
export interface Difference {
  readonly kind: 'plan' | 'code' | 'environment';
  /** e.g. "strata[0].points", "module running", "node" */
  readonly where: string;
  readonly first: string;
  readonly second: string;
}

/** What two JSON values do not share, by path, e.g. strata[0].points: "20000" and "30000". */
export function differencesOfPlans(first: unknown, second: unknown): Difference[] {
  return walk('', first, second).map((d) => ({ kind: 'plan', ...d }));
}

/** Code and data that two runs do not share. The plan and the task are left to `differencesOfPlans`. */
export function differencesOfCode(first: Fingerprints, second: Fingerprints): Difference[] {
  const found = walk('', codeIn(first), codeIn(second));
  return found.map((d) => ({ ...d, kind: 'code' }));
}

export function differencesOfEnvironments(first: object, second: object): Difference[] {
  return walk('', first, second).map((d) => ({ kind: 'environment', ...d }));
}

/** "code of module running changed" and the like, in one line. */
export function inWords(differences: readonly Difference[]): string {
  const shown = differences.slice(0, 4).map(sentence);
  const more = differences.length - shown.length;
  return `${shown.join('; ')}${more > 0 ? `; and ${more} more` : ''}`;
}

function sentence({ kind, where, first, second }: Difference): string {
  if (kind === 'code') return `the code of ${where} changed`;
  return `${where} was ${first}, is ${second}`;
}

function codeIn(fingerprints: Fingerprints): Record<string, string> {
  const { model, sampling, modules, constraints } = fingerprints;
  const prefixed = (kind: string, of: Readonly<Record<string, string>>) =>
    Object.entries(of).map(([name, value]) => [`${kind} ${name}`, value] as const);
  return Object.fromEntries([
    ['the model', model],
    ['sampling', sampling],
    ...prefixed('module', modules),
    ...prefixed('constraint', constraints),
  ]);
}

type Place = Omit<Difference, 'kind'>;

function walk(path: string, first: unknown, second: unknown): Place[] {
  if (isObject(first) && isObject(second) && Array.isArray(first) === Array.isArray(second)) {
    const keys = [...new Set([...Object.keys(first), ...Object.keys(second)])];
    const join = (key: string) => (Array.isArray(first) ? `${path}[${key}]` : path ? `${path}.${key}` : key);
    return keys.flatMap((key) => walk(join(key), first[key], second[key]));
  }
  const [a, b] = [shown(first), shown(second)];
  return a === b ? [] : [{ where: path, first: a, second: b }];
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null;
}

function shown(value: unknown): string {
  return value === undefined ? 'absent' : canonicalJson(value);
}
