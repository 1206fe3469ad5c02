import { FAILURES, VERDICTS } from '../../workers/contract.js';
import { Broken } from '../mistakes.js';
import type { Layout } from './layout.js';
import type { Column, Piece } from './pieces.js';
import type { ChunkResult, JudgedSpan, Span } from './writing.js';

/** The evaluation of a chunk as columns by name.
 *  @throws Broken 'result-shape' where arrays do not have the lengths that the plan asks for */
export function evaluationPiece(layout: Layout, chunk: ChunkResult): Piece {
  const { count } = chunk;
  const columns = new Map<string, Column>([
    ...split(layout.inputs, chunk.inputs, count, 'inputs'),
    ...split(layout.quantities, chunk.result.quantities, count, 'quantities'),
    ...split(['failure'], chunk.result.failures, count, 'failures'),
  ]);
  checkIndices(chunk.result.failures, FAILURES.length, 'failures');
  return pieceAt(layout, chunk, columns);
}

/** The judgement of points as columns by name. */
export function judgementPiece(layout: Layout, judged: JudgedSpan): Piece {
  const { count } = judged;
  const named = (form: string) => layout.constraints.map((name) => `${form}(${name})`);
  const columns = new Map<string, Column>([
    ...split(named('outcome'), judged.outcomes, count, 'outcomes'),
    ...split(named('margin'), judged.margins, count, 'margins'),
    ...split(named('likelihood'), judged.logLikelihoods, count, 'logLikelihoods'),
    ...split(['verdict'], judged.verdicts, count, 'verdicts'),
  ]);
  checkIndices(judged.verdicts, VERDICTS.length, 'verdicts');
  return pieceAt(layout, judged, columns);
}

/** A point that no worker could do: its inputs, and nothing else. */
export function unfinishedChunk(layout: Layout, at: Span, inputs: Float64Array): ChunkResult {
  const absent = (columns: readonly string[]) => new Float64Array(columns.length).fill(NaN);
  const result = {
    count: 1,
    quantities: absent(layout.quantities),
    outcomes: new Uint8Array(layout.constraints.length).fill(2),
    margins: absent(layout.constraints),
    logLikelihoods: absent(layout.constraints),
    failures: new Uint8Array(1),
    verdicts: Uint8Array.of(VERDICTS.indexOf('unfinished')),
  };
  return { ...at, inputs, result, worker: '', milliseconds: 0 };
}

function split(
  names: readonly string[],
  values: Column,
  count: number,
  what: string,
): readonly (readonly [string, Column])[] {
  const wanted = names.length * count;
  if (values.length !== wanted) throw misshapen(what, `${wanted} values`, `${values.length}`);
  return names.map((name, i) => [name, values.subarray(i * count, (i + 1) * count)]);
}

function checkIndices(values: Uint8Array, limit: number, what: string): void {
  const wrong = values.find((value) => value >= limit);
  if (wrong !== undefined) throw misshapen(what, `indices below ${limit}`, `${wrong}`);
}

function pieceAt(layout: Layout, at: Span, columns: ReadonlyMap<string, Column>): Piece {
  const points = layout.strata[at.stratum] ?? 0;
  const fits =
    Number.isSafeInteger(at.first) && at.first >= 0 && at.count > 0 && at.first + at.count <= points;
  if (!fits) throw misshapen('points', `indices below ${points} of stratum ${at.stratum}`, spanText(at));
  return { stratum: at.stratum, first: at.first, count: at.count, columns };
}

function spanText(span: Span): string {
  return `${span.count} points from ${span.first} on`;
}

function misshapen(what: string, expected: string, found: string): Broken {
  return new Broken(
    'result-shape',
    `${what} of a chunk: expected ${expected}, found ${found}. Nothing was stored`,
  );
}
