import { UserMistake } from '../../mistakes.js';
import type { AxisRequest, DensityGrid, Reading, View } from '../reading.js';
import { axisOf, binOf } from './axis.js';
import type { BinnedAxis } from './axis.js';
import { visit } from './visit.js';
import type { Marked } from './visit.js';

/** Counts of the points that pass on a grid. A range that is not chosen is that of the points that can be drawn. */
export function densityOf(
  reading: Reading,
  view: View,
  x: AxisRequest,
  y: AxisRequest,
  colour: string | null,
  bins: readonly [number, number],
): DensityGrid {
  checkBins(bins);
  const [ax, ay] = axesOf(reading, view, x, y, bins);
  const colourColumn = reading.columns(view.run).find((column) => column.name === colour);
  const painter = painterOf(colourColumn?.labels, colour !== null, bins[0] * bins[1]);
  const counts = new Float64Array(bins[0] * bins[1]);
  const columns = [x.column, y.column, ...(colour === null ? [] : [colour])];
  let undrawn = 0;
  for (const batch of visit(reading, view, columns)) {
    const cells = cellsOf(batch, batch.columns.get(x.column)!, batch.columns.get(y.column)!, ax, ay);
    const shades = colour === null ? undefined : batch.columns.get(colour)!;
    for (let i = 0; i < batch.count; i++) {
      if (cells[i] >= 0) {
        counts[cells[i]]++;
        if (shades !== undefined) painter.add(cells[i], shades[i]);
      } else if (cells[i] === UNDRAWN) undrawn++;
    }
  }
  return { x: ax, y: ay, counts, ...painter.result(), undrawn };
}

const FILTERED_OUT = -1;
const UNDRAWN = -2;

function cellsOf(
  batch: Marked,
  x: Float64Array,
  y: Float64Array,
  ax: BinnedAxis,
  ay: BinnedAxis,
): Int32Array {
  const cells = new Int32Array(batch.count);
  const [bx, by] = [binOf(ax), binOf(ay)];
  for (let i = 0; i < batch.count; i++) {
    if (batch.passes[i] === 0) {
      cells[i] = FILTERED_OUT;
      continue;
    }
    const column = bx(x[i]);
    const row = by(y[i]);
    cells[i] = column >= 0 && row >= 0 ? row * ax.bins + column : UNDRAWN;
  }
  return cells;
}

interface Painter {
  add(cell: number, value: number): void;
  result(): Pick<DensityGrid, 'mean' | 'classes'>;
}

function painterOf(labels: readonly string[] | undefined, coloured: boolean, cells: number): Painter {
  if (!coloured) return { add: () => undefined, result: () => ({}) };
  return labels === undefined ? meanPainter(cells) : classPainter(labels, cells);
}

function classPainter(labels: readonly string[], cells: number): Painter {
  const counts = new Float64Array(labels.length * cells);
  return {
    add(cell, value) {
      if (value >= 0 && value < labels.length) counts[value * cells + cell]++;
    },
    result: () => ({ classes: { labels, counts } }),
  };
}

function meanPainter(cells: number): Painter {
  const sums = new Float64Array(cells);
  const numbers = new Float64Array(cells);
  return {
    add(cell, value) {
      if (!Number.isFinite(value)) return;
      sums[cell] += value;
      numbers[cell]++;
    },
    // 0 / 0 is the NaN of a cell without a finite value.
    result: () => ({ mean: sums.map((sum, cell) => sum / numbers[cell]) }),
  };
}

function axesOf(
  reading: Reading,
  view: View,
  x: AxisRequest,
  y: AxisRequest,
  bins: readonly [number, number],
): [BinnedAxis, BinnedAxis] {
  const ranges = [
    [Infinity, -Infinity],
    [Infinity, -Infinity],
  ];
  if (x.range === null || y.range === null) {
    for (const batch of visit(reading, view, [x.column, y.column])) widen(ranges, batch, x, y);
  }
  return [axisOf(x, x.range ?? ranges[0], bins[0]), axisOf(y, y.range ?? ranges[1], bins[1])];
}

/** A point counts for the ranges only if it can be drawn at all: on a chosen range, and positive where logarithmic. */
function widen(ranges: number[][], batch: Marked, x: AxisRequest, y: AxisRequest): void {
  const xs = batch.columns.get(x.column)!;
  const ys = batch.columns.get(y.column)!;
  const [xLow, xHigh] = limitsOf(x);
  const [yLow, yHigh] = limitsOf(y);
  for (let i = 0; i < batch.count; i++) {
    if (batch.passes[i] === 0) continue;
    if (!(xs[i] >= xLow && xs[i] <= xHigh && ys[i] >= yLow && ys[i] <= yHigh)) continue;
    if (xs[i] < ranges[0][0]) ranges[0][0] = xs[i];
    if (xs[i] > ranges[0][1]) ranges[0][1] = xs[i];
    if (ys[i] < ranges[1][0]) ranges[1][0] = ys[i];
    if (ys[i] > ranges[1][1]) ranges[1][1] = ys[i];
  }
}

function limitsOf(axis: AxisRequest): readonly [number, number] {
  if (axis.range !== null) return axis.range;
  return [axis.scale === 'log' ? Number.MIN_VALUE : -Number.MAX_VALUE, Number.MAX_VALUE];
}

function checkBins(bins: readonly [number, number]): void {
  for (const n of bins) {
    if (Number.isInteger(n) && n >= 1 && n <= 2000) continue;
    throw new UserMistake({
      where: 'bins of a density',
      expected: 'a whole number from 1 to 2000',
      found: String(n),
    });
  }
}
