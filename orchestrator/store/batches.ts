import { Broken, UserMistake } from '../mistakes.js';
import type { Extent, Extents } from './extents.js';
import { EVALUATION, JUDGEMENT, kindOf } from './layout.js';
import type { Layout } from './layout.js';
import { nearest } from './nearest.js';
import { storedColumn } from './place.js';
import type { Batch, ColumnRecord } from './records.js';
import type { Segments } from './segments.js';
import { endOf, intersectSpans } from './spans.js';
import type { Span } from './writing.js';

export interface BatchSource {
  readonly run: number;
  readonly layout: Layout;
  readonly extents: Extents;
  readonly segments: Pick<Segments, 'read'>;
}

/** The committed points at (stratum, index), or else the next ones: at most one extent of each kind.
 *  Arrays may be shared with a cache: they must not be written to. */
export function batchFrom(
  source: BatchSource,
  columns: readonly string[],
  stratum: number,
  index: number,
): Batch | undefined {
  const { run, extents } = source;
  const judgement = extents.from(run, JUDGEMENT, stratum, index);
  if (judgement === undefined) return undefined;
  const start = judgement.stratum === stratum ? Math.max(index, judgement.first) : judgement.first;
  const evaluation = extents.from(run, EVALUATION, judgement.stratum, start);
  const judged = { stratum: judgement.stratum, first: start, count: endOf(judgement) - start };
  const span = evaluation && intersectSpans(judged, evaluation);
  if (span?.first !== start) {
    throw new Broken(
      'store-corrupt',
      `run ${run} has outcomes but no quantities of point ${judged.stratum}.${start}`,
    );
  }
  const read = (name: string) =>
    column(source, span, kindOf(name) === JUDGEMENT ? judgement : evaluation!, name);
  return { ...span, columns: new Map(columns.map((name) => [name, read(name)])) };
}

/** @throws UserMistake for a name that is no column of the run */
export function checkColumns(known: readonly ColumnRecord[], asked: readonly string[], where: string): void {
  for (const name of asked) {
    if (known.some((column) => column.name === name)) continue;
    const near = nearest(
      name,
      known.map((column) => column.name),
    );
    const hint = near && `did you mean ${near}?`;
    throw new UserMistake({ expected: 'the name of a column of the run', found: name, where, hint });
  }
}

function column(source: BatchSource, span: Span, extent: Extent, name: string): Float64Array {
  if (name === 'stratum') return new Float64Array(span.count).fill(span.stratum);
  if (name === 'index') return counting(span);
  const offset = extent.offset + span.first - extent.first;
  const part = { ...extent, ...span, offset };
  const values = storedColumn(source.segments, source.layout, part, name);
  return values instanceof Float64Array ? values : new Float64Array(values);
}

function counting(span: Span): Float64Array {
  const values = new Float64Array(span.count);
  for (let i = 0; i < span.count; i++) values[i] = span.first + i;
  return values;
}
