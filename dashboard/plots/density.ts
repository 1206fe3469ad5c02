import { padded, placing, type Axis } from './axis.js';
import { colourBar } from './colour-bar.js';
import { rampColour, type Ramp } from './colours.js';
import { drawing, type Setting } from './drawing.js';
import { boxOf, frame } from './frame.js';
import { upright, type Label } from './label.js';
import { createRaster, rasterImages, type Raster } from './raster.js';

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

/** The cells in their colours. */
export function densityRaster(spec: DensitySpec): Raster {
  const ramp = rampOf(spec);
  const place = placing(colourAxis(spec), 0, STEPS - 1);
  const steps = Int16Array.from(spec.values, (value) => {
    const bare = Number.isNaN(value) || (spec.kind === 'counts' && value === 0);
    return bare ? -1 : Math.min(STEPS - 1, Math.max(0, Math.round(place(value))));
  });
  return createRaster(spec.columns * ENLARGED, spec.rows * ENLARGED, (light) => {
    const colours = Array.from({ length: STEPS }, (_, i) => rampColour(ramp, light, i / (STEPS - 1)));
    return (x, y) => {
      const step = steps[cellAt(spec, x, y)];
      return step < 0 ? null : colours[step];
    };
  });
}

/** A raster of counts or means with its colour bar. */
export function densityPlot(setting: Setting, spec: DensitySpec, raster = densityRaster(spec)): string {
  const box = boxOf(setting.size, spec.y, { legend: 0, bar: true });
  return drawing(
    setting,
    rasterImages(setting, box, raster),
    colourBar(setting, box, colourAxis(spec), rampOf(spec)),
    frame(setting.size, box, spec.x, spec.y),
  );
}

/** Cells are enlarged here rather than by the viewer, so that every program shows them with sharp edges. */
const ENLARGED = 3;
/** Colours of a ramp that a raster tells apart. */
const STEPS = 256;

function rampOf(spec: DensitySpec): Ramp {
  return spec.diverging ? 'diverging' : 'sequence';
}

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
