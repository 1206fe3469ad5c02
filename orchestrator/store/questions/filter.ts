import { compile, ExpressionError } from '../../../workers/expressions/compile.js';
import type { Compiled } from '../../../workers/expressions/compile.js';
import { UserMistake } from '../../mistakes.js';
import { nearest } from '../nearest.js';
import type { ColumnRecord } from '../records.js';

/** A filter that fits the columns of a run: which columns it reads, and which points of a batch pass. */
export interface Filter {
  readonly names: readonly string[];
  /** Writes 1 for a point that passes, 0 for one that does not. An absent value passes nothing. */
  mark(columns: ReadonlyMap<string, Float64Array>, count: number, passes: Uint8Array): void;
}

/** @throws UserMistake saying where in the text, what was expected, and the nearest name that exists */
export function filterOf(where: string, known: readonly ColumnRecord[]): Filter {
  if (where.trim() === '') return everything;
  const compiled = compiledFilter(where);
  const names = known.map((column) => column.name);
  const stranger = compiled.names.find((name) => !names.includes(name));
  if (stranger !== undefined) throw unknownName(stranger, compiled.positions.get(stranger)!, names);
  return { names: compiled.names, mark: marker(compiled) };
}

const everything: Filter = { names: [], mark: (_, count, passes) => void passes.fill(1, 0, count) };

function marker(compiled: Compiled): Filter['mark'] {
  let values = new Float64Array(0);
  return (columns, count, passes) => {
    if (values.length < count) values = new Float64Array(count);
    compiled.evaluate(columns, count, values);
    // A bare number passes where it is neither zero nor absent.
    for (let i = 0; i < count; i++) passes[i] = values[i] !== 0 && values[i] === values[i] ? 1 : 0;
  };
}

function compiledFilter(where: string): Compiled {
  try {
    return compile(where);
  } catch (error) {
    if (!(error instanceof ExpressionError)) throw error;
    throw new UserMistake({
      where: `filter, column ${error.position + 1}`,
      expected: error.expected,
      found: error.found,
    });
  }
}

function unknownName(name: string, position: number, names: readonly string[]): UserMistake {
  const near = nearest(name, names);
  return new UserMistake({
    where: `filter, column ${position + 1}`,
    expected: 'the name of a column of the run',
    found: name,
    hint: near && `did you mean ${near}?`,
  });
}
