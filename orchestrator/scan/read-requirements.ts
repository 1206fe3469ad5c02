import { constraints } from '../../workers/constraints/catalogue.js';
import { unknownKeys } from './check.js';
import { readJudging, type Judging } from './judging.js';
import { Report } from './report.js';
import { SECTIONS } from './shape.js';
import { decode } from './text.js';
import { readTree } from './tree.js';

/** `require` and `note` of a scan file, or of a piece of one; nothing else of it is looked at.
 *  @returns the sections that the file has
 *  @throws FileMistakes with every mistake in them, or where it has neither */
export function readRequirements(bytes: Uint8Array, file: string): Partial<Judging> {
  const tree = readTree(decode(bytes, file), file);
  const report = new Report(file, tree);
  const sections = sectionsOf(tree.value, report);
  unknownKeys(
    Object.keys(sections).filter((key) => !SECTIONS.includes(key)),
    SECTIONS,
    [],
    report,
  );
  const read = readJudging({ require: sections.require, note: sections.note }, constraints, report);
  report.throwIfAny();
  return {
    ...('require' in sections ? { require: read.require } : {}),
    ...('note' in sections ? { note: read.note } : {}),
  };
}

function sectionsOf(value: unknown, report: Report): Readonly<Record<string, unknown>> {
  const isMapping = typeof value === 'object' && value !== null && !Array.isArray(value);
  if (isMapping && ('require' in value || 'note' in value)) return value;
  const expected = 'a mapping with require or note';
  const found =
    value === undefined || value === null
      ? 'an empty file'
      : isMapping
        ? 'neither'
        : report.describe([], value);
  report.value([], { expected, found });
  report.throwIfAny();
  return {};
}
