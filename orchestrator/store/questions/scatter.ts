import type { Reading, ScatterPoints, View } from '../reading.js';
import { visit } from './visit.js';
import type { Marked } from './visit.js';

/** At most `limit` of the points that pass and have finite x and y, chosen evenly by order. `total` counts them all. */
export function scatterOf(
  reading: Reading,
  view: View,
  x: string,
  y: string,
  colour: string | null,
  limit: number,
): ScatterPoints {
  const total = countDrawable(reading, view, x, y);
  const drawn = Math.min(total, limit);
  const columns = [x, y, ...(colour === null ? [] : [colour])];
  const out = columns.map(() => new Float64Array(drawn));
  const stratum = new Float64Array(drawn);
  const index = new Float64Array(drawn);
  let seen = 0;
  let n = 0;
  for (const batch of visit(reading, view, columns)) {
    const values = columns.map((name) => batch.columns.get(name)!);
    for (let i = 0; i < batch.count; i++) {
      if (!isDrawable(batch, values[0], values[1], i)) continue;
      // Point number k is drawn where floor(k * drawn / total) rises: evenly, and the first one always.
      const chosen = n < drawn && seen * drawn >= n * total;
      seen++;
      if (!chosen) continue;
      values.forEach((column, c) => (out[c][n] = column[i]));
      stratum[n] = batch.stratum;
      index[n++] = batch.first + i;
    }
  }
  return { x: out[0], y: out[1], colour: out[2] ?? null, stratum, index, total };
}

function countDrawable(reading: Reading, view: View, x: string, y: string): number {
  let total = 0;
  for (const batch of visit(reading, view, [x, y])) {
    const xs = batch.columns.get(x)!;
    const ys = batch.columns.get(y)!;
    for (let i = 0; i < batch.count; i++) if (isDrawable(batch, xs, ys, i)) total++;
  }
  return total;
}

function isDrawable(batch: Marked, x: Float64Array, y: Float64Array, i: number): boolean {
  return batch.passes[i] === 1 && Number.isFinite(x[i]) && Number.isFinite(y[i]);
}
