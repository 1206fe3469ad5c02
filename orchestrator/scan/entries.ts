import type { Path } from './path.js';
import type { Report } from './report.js';

export function isMapping(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** The entries of a mapping; none where there is nothing, or after complaining about something else. */
export function entriesOf(raw: unknown, expected: string, path: Path, report: Report): [string, unknown][] {
  if (isMapping(raw)) return Object.entries(raw);
  if (raw !== undefined) report.value(path, { expected, found: report.describe(path, raw) });
  return [];
}
