import type { Axis } from './axis.js';
import { blend, CLASS_COLOURS, parseHex, type Light, type Rgb } from './colours.js';
import { drawing, type Setting } from './drawing.js';
import { boxOf, frame } from './frame.js';
import { legend } from './legend.js';
import { raster } from './raster.js';

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

/** The plane coloured by class. Where a cell holds several classes the colours mix by their shares, so that an
 *  edge is as soft as the data make it. Shares are smoothed over neighbouring cells and drawn between centres. */
export function regionsPlot(setting: Setting, spec: RegionsSpec): string {
  const present = spec.labels.map((_, index) => index).filter((index) => classTotal(spec, index) > 0);
  const draft = boxOf(setting.size, spec.y, { legend: 0, bar: false });
  const key = legend(
    setting.size,
    draft.left,
    present.map((index) => ({ name: spec.labels[index], colour: spec.colours[index] })),
  );
  const box = boxOf(setting.size, spec.y, { legend: key.height, bar: false });
  const smooth = present.map((index) => smoothed(spec, index));
  const palettes = { day: palette(spec, present, 'day'), night: palette(spec, present, 'night') };
  return drawing(
    setting,
    raster(setting, box, spec.columns * ENLARGED, spec.rows * ENLARGED, (x, y, light) =>
      mixture(spec, smooth, palettes[light], x, y),
    ),
    frame(setting.size, box, spec.x, spec.y),
    key.svg,
  );
}

const ENLARGED = 4;

function classTotal(spec: RegionsSpec, index: number): number {
  const cells = spec.columns * spec.rows;
  return spec.counts.subarray(index * cells, (index + 1) * cells).reduce((sum, count) => sum + count, 0);
}

function palette(spec: RegionsSpec, present: readonly number[], light: Light): readonly Rgb[] {
  const colours = CLASS_COLOURS[light];
  return present.map((index) => parseHex(colours[spec.colours[index] % colours.length]));
}

/** Counts of one class after a 1-2-1 kernel in both directions. */
function smoothed(spec: RegionsSpec, index: number): Float64Array {
  const { columns, rows } = spec;
  const counts = spec.counts.subarray(index * columns * rows, (index + 1) * columns * rows);
  const out = new Float64Array(columns * rows);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      let sum = 0;
      for (let dy = -1; dy <= 1; dy++) {
        for (let dx = -1; dx <= 1; dx++) {
          const r = row + dy;
          const c = column + dx;
          if (r < 0 || c < 0 || r >= rows || c >= columns) continue;
          sum += counts[r * columns + c] * (2 - Math.abs(dx)) * (2 - Math.abs(dy));
        }
      }
      out[row * columns + column] = sum;
    }
  }
  return out;
}

function mixture(
  spec: RegionsSpec,
  smooth: readonly Float64Array[],
  colours: readonly Rgb[],
  x: number,
  y: number,
): Rgb | null {
  const weights = smooth.map((grid) => between(spec, grid, x, y));
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  if (total <= 0) return null;
  const only = weights.findIndex((weight) => weight === total);
  if (only >= 0) return colours[only];
  return blend(weights.map((weight, i) => ({ colour: colours[i], weight })));
}

/** The grid between cell centres, bilinear. */
function between(spec: RegionsSpec, grid: Float64Array, x: number, y: number): number {
  const { columns, rows } = spec;
  const px = Math.min(columns - 1, Math.max(0, x * columns - 0.5));
  const py = Math.min(rows - 1, Math.max(0, y * rows - 0.5));
  const c = Math.min(Math.max(0, columns - 2), Math.floor(px));
  const r = Math.min(Math.max(0, rows - 2), Math.floor(py));
  const c1 = Math.min(columns - 1, c + 1);
  const r1 = Math.min(rows - 1, r + 1);
  const low = grid[r * columns + c] * (1 - (px - c)) + grid[r * columns + c1] * (px - c);
  const high = grid[r1 * columns + c] * (1 - (px - c)) + grid[r1 * columns + c1] * (px - c);
  return low * (1 - (py - r)) + high * (py - r);
}
