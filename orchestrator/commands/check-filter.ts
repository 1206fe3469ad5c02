import type { FilterMistake } from '../../dashboard/commands.js';
import { compile, ExpressionError } from '../../workers/expressions/compile.js';
import { nearest } from '../store/nearest.js';

/** What is wrong with a filter over columns of these names, or null. An empty one passes everything. */
export function filterMistake(where: string, columns: readonly string[]): FilterMistake | null {
  if (where.trim() === '') return null;
  try {
    const { names, positions } = compile(where);
    const stranger = names.find((name) => !columns.includes(name));
    return stranger === undefined ? null : unknownName(stranger, positions.get(stranger) ?? 0, columns);
  } catch (error) {
    if (!(error instanceof ExpressionError)) throw error;
    const { position, expected, found } = error;
    return { position, expected, found };
  }
}

function unknownName(name: string, position: number, columns: readonly string[]): FilterMistake {
  const near = nearest(name, columns);
  return {
    position,
    expected: 'the name of a column',
    found: name,
    ...(near === undefined ? {} : { hint: `did you mean ${near}?` }),
  };
}
