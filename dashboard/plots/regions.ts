import type { Axis } from './axis.js';
import { blend, CLASS_COLOURS, parseHex, type Rgb } from './colours.js';
import { drawing, type Setting } from './drawing.js';
import { boxOf, frame } from './frame.js';
import { legend } from './legend.js';
import { createRaster, rasterImages, type Raster } from './raster.js';

export interface RegionsSpec {
  readonly x: Axis;
  readonly y: Axis;
  readonly columns: number;
  readonly rows: number;
  readonly labels: readonly string[];
  /** Colour of each label, an index into CLASS_COLOURS. */
  readonly colours: readonly number[];
  /** Points per class and cell: labels x cells, cells row by row from low y. */
  readonly counts: Float64Array;
}

/** The plane in the colours of its classes. Where a cell holds several classes the colours mix by their shares, so
 *  that an edge is as soft as the data make it. Shares are smoothed over neighbouring cells and drawn between cell
 *  centres. */
export function regionsRaster(spec: RegionsSpec): Raster {
  const present = presentIn(spec);
  const totals = cellTotals(spec);
  const smooth = present.map((index) => smoothed(spec, index, totals));
  return createRaster(spec.columns * ENLARGED, spec.rows * ENLARGED, (light) => {
    const all = CLASS_COLOURS[light];
    const colours = present.map((index) => parseHex(all[spec.colours[index] % all.length]));
    return (x, y) => mixture(betweenCells(spec, x, y), smooth, colours);
  });
}

/** The regions with a legend of the classes that occur. */
export function regionsPlot(setting: Setting, spec: RegionsSpec, raster = regionsRaster(spec)): string {
  const draft = boxOf(setting.size, spec.y, { legend: 0, bar: false });
  const entries = presentIn(spec).map((index) => ({ name: spec.labels[index], colour: spec.colours[index] }));
  const key = legend(setting.size, draft.left, entries);
  const box = boxOf(setting.size, spec.y, { legend: key.height, bar: false });
  return drawing(
    setting,
    rasterImages(setting, box, raster),
    frame(setting.size, box, spec.x, spec.y),
    key.svg,
  );
}

/** Pixels a cell and direction, enough for smooth edges. */
const ENLARGED = 4;

/** Classes with any point. */
function presentIn(spec: RegionsSpec): readonly number[] {
  const cells = spec.columns * spec.rows;
  return spec.labels
    .map((_, index) => index)
    .filter((index) => spec.counts.subarray(index * cells, (index + 1) * cells).some((count) => count > 0));
}

/** Points of all classes in each cell. */
function cellTotals(spec: RegionsSpec): Float64Array {
  const cells = spec.columns * spec.rows;
  const totals = new Float64Array(cells);
  spec.counts.forEach((count, i) => (totals[i % cells] += count));
  return totals;
}

/** Shares of one class after a 1-2-1 kernel in both directions. Every cell with points counts alike, so that a cell
 *  with very many does not spill over its neighbours. */
function smoothed(spec: RegionsSpec, index: number, totals: Float64Array): Float64Array {
  const { columns, rows } = spec;
  const counts = spec.counts.subarray(index * columns * rows, (index + 1) * columns * rows);
  const shares = counts.map((count, cell) => (totals[cell] > 0 ? count / totals[cell] : 0));
  const out = new Float64Array(columns * rows);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      let sum = 0;
      for (let dy = -1; dy <= 1; dy++) {
        for (let dx = -1; dx <= 1; dx++) {
          const r = row + dy;
          const c = column + dx;
          if (r < 0 || c < 0 || r >= rows || c >= columns) continue;
          sum += shares[r * columns + c] * (2 - Math.abs(dx)) * (2 - Math.abs(dy));
        }
      }
      out[row * columns + column] = sum;
    }
  }
  return out;
}

/** The four cells around a place and their bilinear weights. */
interface Between {
  readonly cells: readonly [number, number, number, number];
  readonly weights: readonly [number, number, number, number];
}

function betweenCells({ columns, rows }: RegionsSpec, x: number, y: number): Between {
  const px = Math.min(columns - 1, Math.max(0, x * columns - 0.5));
  const py = Math.min(rows - 1, Math.max(0, y * rows - 0.5));
  const [c, r] = [Math.floor(px), Math.floor(py)];
  const [fx, fy] = [px - c, py - r];
  const right = c + 1 < columns ? 1 : 0;
  const up = r + 1 < rows ? columns : 0;
  const cell = r * columns + c;
  return {
    cells: [cell, cell + right, cell + up, cell + up + right],
    weights: [(1 - fx) * (1 - fy), fx * (1 - fy), (1 - fx) * fy, fx * fy],
  };
}

function mixture(place: Between, smooth: readonly Float64Array[], colours: readonly Rgb[]): Rgb | null {
  const { cells, weights } = place;
  const shares = smooth.map(
    (grid) =>
      grid[cells[0]] * weights[0] +
      grid[cells[1]] * weights[1] +
      grid[cells[2]] * weights[2] +
      grid[cells[3]] * weights[3],
  );
  const filled = shares.findIndex((share) => share > 0);
  if (filled < 0) return null;
  if (!shares.some((share, i) => share > 0 && i !== filled)) return colours[filled];
  return blend(shares.map((weight, i) => ({ colour: colours[i], weight })));
}
