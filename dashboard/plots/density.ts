import { padded, type Axis } from './axis.js';
import { colourBar, shareOf } from './colour-bar.js';
import { rampColour, type Ramp } from './colours.js';
import { drawing, type Setting } from './drawing.js';
import { boxOf, frame } from './frame.js';
import { upright, type Label } from './label.js';
import { raster } from './raster.js';

/** Values on a grid over the plane, row by row from low y; the axes end where the grid ends. */
export interface DensitySpec {
  readonly x: Axis;
  readonly y: Axis;
  readonly columns: number;
  readonly rows: number;
  /** NaN or, for counts, 0 leaves a cell bare. */
  readonly values: Float64Array;
  /** `counts` of points a cell, coloured by ln; or the mean of some quantity. */
  readonly kind: 'counts' | 'mean';
  readonly label: Label;
  readonly unit: Label;
  readonly scale: 'linear' | 'log';
  /** A ramp around zero, for signed quantities such as margins. */
  readonly diverging: boolean;
}

/** A raster of counts or means with its colour bar. */
export function densityPlot(setting: Setting, spec: DensitySpec): string {
  const box = boxOf(setting.size, spec.y, { legend: 0, bar: true });
  const ramp: Ramp = spec.diverging ? 'diverging' : 'sequence';
  const colour = colourAxis(spec);
  return drawing(
    setting,
    raster(setting, box, spec.columns * ENLARGED, spec.rows * ENLARGED, (x, y, light) => {
      const value = spec.values[cellAt(spec, x, y)];
      const bare = Number.isNaN(value) || (spec.kind === 'counts' && value === 0);
      return bare ? null : rampColour(ramp, light, shareOf(colour, value));
    }),
    colourBar(setting, box, colour, ramp),
    frame(setting.size, box, spec.x, spec.y),
  );
}

/** Cells are enlarged here rather than by the viewer, so that every program shows them with sharp edges. */
const ENLARGED = 3;

function cellAt(spec: DensitySpec, x: number, y: number): number {
  const column = Math.min(spec.columns - 1, Math.floor(x * spec.columns));
  const row = Math.min(spec.rows - 1, Math.floor(y * spec.rows));
  return row * spec.columns + column;
}

function colourAxis(spec: DensitySpec): Axis {
  const base = { label: spec.label, unit: spec.unit };
  let low = Infinity;
  let high = -Infinity;
  for (const value of spec.values) {
    if (Number.isNaN(value) || (value <= 0 && (spec.kind === 'counts' || spec.scale === 'log'))) continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  if (spec.kind === 'counts') return { ...base, low: 1, high: Math.max(10, high), scale: 'log' };
  return { ...base, ...colourRange(low, high, spec) };
}

export function colourRange(
  low: number,
  high: number,
  spec: { readonly scale: 'linear' | 'log'; readonly diverging: boolean },
): { low: number; high: number; scale: 'linear' | 'log' } {
  if (spec.diverging) {
    const reach = Math.max(Math.abs(low), Math.abs(high));
    const end = Number.isFinite(reach) && reach > 0 ? reach : 1;
    return { low: -end, high: end, scale: 'linear' };
  }
  const [from, to] = low < high ? [low, high] : padded(low, high, spec.scale);
  return { low: from, high: to, scale: spec.scale };
}

export const COUNTS_LABEL = upright('points in a cell');
