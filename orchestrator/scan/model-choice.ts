import type { Model, Options } from '../../workers/contract.js';
import { entriesOf, isMapping } from './entries.js';
import { unknownKeys } from './check.js';
import { readOptions } from './judging.js';
import type { Path } from './path.js';
import { didYouMean, quote } from './phrases.js';
import type { Report } from './report.js';

export interface ChosenModel {
  readonly model: Model;
  readonly options: Options;
}

/** `model`: a name, or { name, options }. */
export function readModel(
  raw: unknown,
  models: ReadonlyMap<string, Model>,
  report: Report,
): ChosenModel | undefined {
  const path = ['model'];
  if (typeof raw === 'string') return choose(raw, undefined, path, path, models, report);
  if (raw === undefined) {
    report.value(path, { expected: `a model: ${[...models.keys()].join(', ')}`, found: 'none' });
    return undefined;
  }
  const entries = new Map(entriesOf(raw, 'a name or { name, options }', path, report));
  if (!isMapping(raw)) return undefined;
  const known = ['name', 'options'];
  unknownKeys(
    [...entries.keys()].filter((key) => !known.includes(key)),
    known,
    path,
    report,
  );
  const name = entries.get('name');
  const at = [...path, 'name'];
  if (typeof name === 'string') return choose(name, entries.get('options'), path, at, models, report);
  report.value(at, { expected: 'the name of a model', found: report.describe(at, name) });
  return undefined;
}

function choose(
  name: string,
  options: unknown,
  path: Path,
  at: Path,
  models: ReadonlyMap<string, Model>,
  report: Report,
): ChosenModel | undefined {
  const model = models.get(name);
  if (!model) {
    const hint = didYouMean(name, models.keys());
    const expected = `a model: ${[...models.keys()].join(', ')}`;
    report.value(at, { expected, found: quote(name), ...(hint ? { hint } : {}) });
    return undefined;
  }
  const read = readOptions(options, model.options, [...path, 'options'], report);
  return { model, options: read ?? {} };
}
