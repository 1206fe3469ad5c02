import { UserMistake } from '../../mistakes.js';
import type { AxisRequest, DensityGrid, Reading, View } from '../reading.js';
import { axisOf, findBins } from './axis.js';
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
  const cells = cellFinder(ax, ay);
  let undrawn = 0;
  for (const batch of visit(reading, view, columns)) {
    const { count, passes } = batch;
    const cell = cells(batch.columns.get(x.column)!, batch.columns.get(y.column)!, count);
    const shades = colour === null ? undefined : batch.columns.get(colour)!;
    for (let i = 0; i < count; i++) {
      if (passes[i] === 0) continue;
      if (cell[i] < 0) undrawn++;
      else counts[cell[i]]++;
    }
    if (shades !== undefined) painter.add(batch, cell, shades);
  }
  return { x: ax, y: ay, counts, ...painter.result(), undrawn };
}

type FindCells = (x: Float64Array, y: Float64Array, count: number) => Int32Array;

/** The cell of every point of a batch, -1 where it cannot be drawn; good until the next batch. */
function cellFinder(ax: BinnedAxis, ay: BinnedAxis): FindCells {
  let columns = new Int32Array(0);
  let rows = new Int32Array(0);
  return (x, y, count) => {
    if (columns.length < count) [columns, rows] = [new Int32Array(count), new Int32Array(count)];
    findBins(ax, x, count, columns);
    findBins(ay, y, count, rows);
    for (let i = 0; i < count; i++)
      columns[i] = (columns[i] | rows[i]) < 0 ? -1 : rows[i] * ax.bins + columns[i];
    return columns;
  };
}

type Range = readonly [number, number];

interface Painter {
  add(batch: Marked, cell: Int32Array, shades: Float64Array): void;
  result(): Pick<DensityGrid, 'mean' | 'classes'>;
}

function painterOf(labels: readonly string[] | undefined, coloured: boolean, cells: number): Painter {
  if (!coloured) return { add: () => undefined, result: () => ({}) };
  return labels === undefined ? meanPainter(cells) : classPainter(labels, cells);
}

function classPainter(labels: readonly string[], cells: number): Painter {
  const counts = new Float64Array(labels.length * cells);
  return {
    add({ count, passes }, cell, shades) {
      for (let i = 0; i < count; i++) {
        const value = shades[i];
        if (passes[i] === 1 && cell[i] >= 0 && value >= 0 && value < labels.length)
          counts[value * cells + cell[i]]++;
      }
    },
    result: () => ({ classes: { labels, counts } }),
  };
}

function meanPainter(cells: number): Painter {
  const sums = new Float64Array(cells);
  const numbers = new Float64Array(cells);
  return {
    add({ count, passes }, cell, shades) {
      for (let i = 0; i < count; i++) {
        if (passes[i] === 0 || cell[i] < 0 || !Number.isFinite(shades[i])) continue;
        sums[cell[i]] += shades[i];
        numbers[cell[i]]++;
      }
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
  const nothing: Range = [Infinity, -Infinity];
  const ranges: [Range, Range] = [nothing, nothing];
  if (x.range === null || y.range === null) {
    for (const batch of visit(reading, view, [x.column, y.column])) widen(ranges, batch, x, y);
  }
  return [axisOf(x, x.range ?? ranges[0], bins[0]), axisOf(y, y.range ?? ranges[1], bins[1])];
}

/** A point counts for the ranges only if it can be drawn at all: on a chosen range, and positive where logarithmic. */
function widen(ranges: [Range, Range], batch: Marked, x: AxisRequest, y: AxisRequest): void {
  const { count, passes } = batch;
  const xs = batch.columns.get(x.column)!;
  const ys = batch.columns.get(y.column)!;
  const [xLow, xHigh] = limitsOf(x);
  const [yLow, yHigh] = limitsOf(y);
  let [[x0, x1], [y0, y1]] = ranges;
  for (let i = 0; i < count; i++) {
    const a = xs[i];
    const b = ys[i];
    if (passes[i] === 0 || !(a >= xLow && a <= xHigh && b >= yLow && b <= yHigh)) continue;
    if (a < x0) x0 = a;
    if (a > x1) x1 = a;
    if (b < y0) y0 = b;
    if (b > y1) y1 = b;
  }
  ranges[0] = [x0, x1];
  ranges[1] = [y0, y1];
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
