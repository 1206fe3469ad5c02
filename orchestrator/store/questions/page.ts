import { checkColumns } from '../batches.js';
import type { PageOfPoints, Position, Reading, View } from '../reading.js';
import { sliceOf } from './slice.js';
import { visit } from './visit.js';

/** Rows offset .. offset + limit - 1 of the points that pass, in (stratum, index) order. */
export function pageOf(
  reading: Reading,
  view: View,
  columns: readonly string[],
  offset: number,
  limit: number,
): PageOfPoints {
  const known = reading.columns(view.run);
  checkColumns(known, columns, `columns of run ${view.run}`);
  const { total, start } = locate(reading, view, offset);
  const rows = start === null ? [] : rowsFrom(reading, view, columns, start, limit);
  const shown = columns.map((name) => known.find((column) => column.name === name)!);
  return { total, offset, columns: shown, rows };
}

/** How many points pass, and where the one after the first `offset` of them lies. */
function locate(reading: Reading, view: View, offset: number): { total: number; start: Position | null } {
  let total = 0;
  let start: Position | null = null;
  for (const batch of visit(reading, view, [])) {
    for (let i = 0; i < batch.count; i++) {
      if (batch.passes[i] === 1 && total === offset)
        start ??= { stratum: batch.stratum, index: batch.first + i };
      total += batch.passes[i];
    }
  }
  return { total, start };
}

function rowsFrom(
  reading: Reading,
  view: View,
  columns: readonly string[],
  start: Position,
  limit: number,
): PageOfPoints['rows'] {
  const slice = sliceOf(reading, view, ['stratum', 'index', ...columns], start, limit);
  const values = columns.map((name) => slice.columns.get(name)!);
  return Array.from({ length: slice.count }, (_, i) => ({
    stratum: slice.columns.get('stratum')![i],
    index: slice.columns.get('index')![i],
    values: values.map((column) => column[i]),
  }));
}
