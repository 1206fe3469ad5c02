import { z } from 'zod';
import { didYouMean } from './phrases.js';
import type { Path } from './path.js';
import type { Report } from './report.js';

type Issue = z.core.$ZodIssue;

/** Part of a scan file with these keys and no others. The message for unknown keys is the list of known ones. */
export function mapping<S extends z.core.$ZodLooseShape>(
  shape: S,
  what: string,
): z.ZodObject<S, z.core.$strict> {
  return z.strictObject(shape, {
    error: (issue) => (issue.code === 'unrecognized_keys' ? Object.keys(shape).join(', ') : what),
  });
}

/** Validates one part of a file. Messages of the schema say what was expected; every issue becomes a mistake.
 *  @returns the value, or undefined after complaining */
export function check<T>(schema: z.ZodType<T>, value: unknown, path: Path, report: Report): T | undefined {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  for (const issue of result.error.issues) complain(issue, value, path, report);
  return undefined;
}

function complain(issue: Issue, value: unknown, path: Path, report: Report): void {
  const at = [...path, ...(issue.path as (string | number)[])];
  const inside = valueAt(value, issue.path);
  if (issue.code === 'unrecognized_keys')
    return unknownKeys(issue.keys, issue.message.split(', ').filter(Boolean), at, report);
  if (issue.code === 'invalid_union') {
    const fitting = bestBranch(issue.errors);
    if (fitting) return fitting.forEach((inner) => complain(inner, inside, at, report));
  }
  const found = report.describe(at, inside);
  const hint = hintFor(issue, inside);
  report.value(at, { expected: issue.message, found, ...(hint ? { hint } : {}) });
}

function hintFor(issue: Issue, found: unknown): string | undefined {
  if (issue.code === 'invalid_value' && typeof found === 'string')
    return didYouMean(found, issue.values.map(String));
  return wantsNumber(issue) ? numberHint(found) : undefined;
}

function wantsNumber(issue: Issue): boolean {
  if (issue.code === 'invalid_union') return issue.errors.some((branch) => branch.some(wantsNumber));
  return issue.code === 'invalid_type' && (issue.expected === 'number' || issue.expected === 'int');
}

/** Complains about keys that a part of a file does not have. */
export function unknownKeys(
  keys: readonly string[],
  known: readonly string[],
  path: Path,
  report: Report,
): void {
  for (const key of keys) {
    const hint = didYouMean(key, known);
    const expected = known.length > 1 ? `one of ${known.join(', ')}` : (known[0] ?? 'no keys');
    report.key([...path, key], { expected, found: report.describe([], key), ...(hint ? { hint } : {}) });
  }
}

/** The branch of a union whose kind of value fits and that has the fewest issues; undefined if none fits. */
function bestBranch(branches: readonly (readonly Issue[])[]): readonly Issue[] | undefined {
  const fitting = branches.filter(
    (issues) => !issues.some((i) => i.path.length === 0 && i.code !== 'unrecognized_keys'),
  );
  return [...fitting].sort((a, b) => a.length - b.length)[0];
}

function valueAt(value: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>(
    (at, key) =>
      typeof at === 'object' && at !== null ? (at as Record<PropertyKey, unknown>)[key] : undefined,
    value,
  );
}

/** What to write instead of a text that was meant as a number. */
export function numberHint(found: unknown): string | undefined {
  if (typeof found !== 'string') return undefined;
  const text = found.trim();
  if (isNumber(text)) return `write ${text} without quotes`;
  const bare = text.replace(/(?<=\d)[_' ](?=\d)/g, '');
  if (isNumber(bare)) return `write ${bare}`;
  if (/^\d+,\d+$/.test(text)) return `write ${text.replace(',', '.')}`;
  const [, number, unit] = /^([-+.\deE]+)\s*([A-Za-z^\-\d]+)$/.exec(text) ?? [];
  return number && isNumber(number) ? `write { value: ${number}, unit: ${unit} }` : undefined;
}

function isNumber(text: string): boolean {
  return /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d+)?$/.test(text);
}
