import type { AsyncQuestions, DensityGrid, FilteredCounts } from '../orchestrator/store/reading.js';
import type { ColumnRecord, RunRecord } from '../orchestrator/store/records.js';
import { classColours, isClass } from './columns.js';
import { countText } from './numbers.js';
import { padded, type Axis } from './plots/axis.js';
import { COUNTS_LABEL, densityPlot, densityRaster } from './plots/density.js';
import type { Setting } from './plots/drawing.js';
import { regionsPlot, regionsRaster } from './plots/regions.js';
import { scatterPlot, type Colouring } from './plots/scatter.js';
import { html, type Safe } from './html.js';
import { parseSymbol, symbolHtml, symbolText, unitLabel } from './symbols.js';
import { plannedRange } from './usual-view.js';
import { axisEnds, type RunView, type ScaleChoice } from './view.js';

export interface FigureRequest {
  readonly run: RunRecord;
  /** The whole filter. */
  readonly where: string;
  readonly view: RunView;
  readonly columns: readonly ColumnRecord[];
  readonly counts: FilteredCounts;
}

/** A figure ready to be drawn at any size, with what there is to say about it. */
export interface Figure {
  /** What the figure shows, in words, and the same with proper symbols. */
  readonly summary: string;
  readonly caption: Safe;
  /** How it was drawn: kind, how many points are missing from it. */
  readonly remark: string;
  /** What must be known of the columns it shows. */
  readonly cautions: readonly string[];
  draw(setting: Setting): string;
}

/** Single points up to this many; beyond, cells say more and weigh less. */
const MOST_POINTS = 4000;

/** Asks the store for what the figure needs; undefined where no point has a place on these axes. */
export async function figureOf(
  questions: AsyncQuestions,
  request: FigureRequest,
): Promise<Figure | undefined> {
  const { view, columns, counts } = request;
  const x = columns.find((column) => column.name === view.x);
  const y = columns.find((column) => column.name === view.y);
  const colour = columns.find((column) => column.name === view.colour);
  if (!x || !y || counts.points === 0) return undefined;
  const points = view.drawing === 'points' || (view.drawing === 'auto' && counts.points <= MOST_POINTS);
  return points ? asPoints(questions, request, x, y, colour) : asCells(questions, request, x, y, colour);
}

async function asPoints(
  questions: AsyncQuestions,
  request: FigureRequest,
  x: ColumnRecord,
  y: ColumnRecord,
  colour: ColumnRecord | undefined,
): Promise<Figure | undefined> {
  const { run, where, view, counts } = request;
  const found = await questions.scatter(
    { run: run.id, where },
    x.name,
    y.name,
    colour?.name ?? null,
    MOST_POINTS,
  );
  const [xScale, yScale] = [scaleOf(x, view.xScale), scaleOf(y, view.yScale)];
  const axes = {
    x: axisOf(x, chosenRange(request, 'x', x) ?? rangeOf(found.x, xScale), xScale),
    y: axisOf(y, chosenRange(request, 'y', y) ?? rangeOf(found.y, yScale), yScale),
  };
  const spec = { ...axes, xs: found.x, ys: found.y, colour: colouring(colour, found.colour) };
  if (found.total === 0) return undefined;
  const coloured = (i: number): boolean => !found.colour || Number.isFinite(found.colour[i]);
  const drawn = found.x.filter(
    (value, i) => placed(axes.x, value) && placed(axes.y, found.y[i]) && coloured(i),
  ).length;
  const every = Math.round(found.total / found.x.length);
  const some = every > 1 ? `Every ${nth(every)} point in order; ` : '';
  return {
    summary: `Points in the plane of ${nameOf(y)} against ${nameOf(x)}${colourPhrase(colour)}.`,
    caption: captionOf('Points', x, y, colour),
    cautions: cautionsOf([x, y, colour]),
    remark: `${some}${countText(drawn)} points drawn${absentPhrase(counts.points - found.total + found.x.length - drawn)}`,
    draw: (setting) => scatterPlot(setting, spec),
  };
}

async function asCells(
  questions: AsyncQuestions,
  request: FigureRequest,
  x: ColumnRecord,
  y: ColumnRecord,
  colour: ColumnRecord | undefined,
): Promise<Figure | undefined> {
  const { run, where, view, counts } = request;
  const [xScale, yScale] = [scaleOf(x, view.xScale), scaleOf(y, view.yScale)];
  const grid = await questions.density(
    { run: run.id, where },
    { column: x.name, scale: xScale, range: chosenRange(request, 'x', x) },
    { column: y.name, scale: yScale, range: chosenRange(request, 'y', y) },
    colour?.name ?? null,
    cellsFor(counts.points),
  );
  if (grid.undrawn >= counts.points) return undefined;
  const axes = {
    x: axisOf(x, [grid.x.low, grid.x.high], xScale),
    y: axisOf(y, [grid.y.low, grid.y.high], yScale),
  };
  const kind = grid.classes ? 'Regions' : grid.mean ? 'Mean values' : 'Density of points';
  const cells = `${grid.x.bins} × ${grid.y.bins} cells`;
  return {
    summary: `${kind} in the plane of ${nameOf(y)} against ${nameOf(x)}${colourPhrase(colour)}.${classPhrase(grid)}`,
    caption: captionOf(kind, x, y, colour),
    cautions: cautionsOf([x, y, colour]),
    remark: `${cells}${grid.classes ? ', colours mixed by share and smoothed over neighbours' : ''}${absentPhrase(grid.undrawn)}`,
    draw: gridDrawing(axes, grid, colour),
  };
}

/** The raster is painted once, whatever sizes are drawn. */
function gridDrawing(
  axes: { x: Axis; y: Axis },
  grid: DensityGrid,
  colour: ColumnRecord | undefined,
): (setting: Setting) => string {
  const size = { columns: grid.x.bins, rows: grid.y.bins };
  if (grid.classes && colour) {
    const spec = { ...axes, ...size, ...grid.classes, colours: classColours(colour) };
    const raster = regionsRaster(spec);
    return (setting) => regionsPlot(setting, spec, raster);
  }
  const spec = { ...axes, ...size, ...densityOf(grid, colour) };
  const raster = densityRaster(spec);
  return (setting) => densityPlot(setting, spec, raster);
}

function densityOf(grid: DensityGrid, colour: ColumnRecord | undefined) {
  if (!grid.mean || !colour) {
    const counts = { values: grid.counts, kind: 'counts', label: COUNTS_LABEL, unit: [] } as const;
    return { ...counts, scale: 'linear', diverging: false } as const;
  }
  return { values: grid.mean, kind: 'mean', ...rampOf(colour) } as const;
}

function rampOf(column: ColumnRecord) {
  return {
    label: parseSymbol(column.symbol),
    unit: unitLabel(column.unit),
    scale: column.logarithmic ? 'log' : 'linear',
    diverging: column.kind === 'margin',
  } as const;
}

/** The range that was asked for. Else the whole range of the plan, so that axes stay where they are while verdicts
 *  are filtered; but the range of the data for what the filter itself narrows. */
function chosenRange(
  request: FigureRequest,
  axis: 'x' | 'y',
  column: ColumnRecord,
): readonly [number, number] | null {
  const ends = axisEnds(request.view[`${axis}Range`]);
  if (ends) return ends;
  const narrowed = new RegExp(`\\b(${column.name}|stratum|index)\\b`).test(request.where);
  return column.kind === 'input' && !narrowed ? plannedRange(request.run, column.name) : null;
}

function colouring(column: ColumnRecord | undefined, values: Float64Array | null): Colouring {
  if (!column || !values) return { kind: 'none' };
  if (isClass(column)) {
    return { kind: 'classes', values, labels: column.labels ?? [], colours: classColours(column) };
  }
  return { kind: 'ramp', values, ...rampOf(column) };
}

function scaleOf(column: ColumnRecord, choice: ScaleChoice): 'linear' | 'log' {
  if (isClass(column)) return 'linear';
  return choice === 'auto' ? (column.logarithmic ? 'log' : 'linear') : choice;
}

function axisOf(column: ColumnRecord, range: readonly [number, number], scale: 'linear' | 'log'): Axis {
  const base = { label: parseSymbol(column.symbol), unit: unitLabel(column.unit), scale };
  if (isClass(column)) {
    const labels = column.labels ?? [];
    return {
      ...base,
      low: Math.min(range[0], -0.5),
      high: Math.max(range[1], labels.length - 0.5),
      categories: labels,
    };
  }
  const [low, high] = range[0] < range[1] ? range : padded(range[0], range[1], scale);
  return { ...base, low, high };
}

function rangeOf(values: Float64Array, scale: 'linear' | 'log'): readonly [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const value of values) {
    if (!Number.isFinite(value) || (scale === 'log' && value <= 0)) continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return padded(low, high, scale);
}

/** Some two points a cell: fewer would show noise, more would blur edges. */
function cellsFor(points: number): readonly [number, number] {
  const across = Math.round(Math.min(160, Math.max(16, Math.sqrt((points / 2) * 1.3))));
  return [across, Math.round(across / 1.3)];
}

function placed(axis: Axis, value: number): boolean {
  return value >= axis.low && value <= axis.high;
}

function cautionsOf(columns: readonly (ColumnRecord | undefined)[]): string[] {
  return [...new Set(columns.flatMap((column) => column?.caution ?? []))];
}

function nameOf(column: ColumnRecord): string {
  return `${symbolText(column.symbol)} (${column.meaning})`;
}

function captionOf(kind: string, x: ColumnRecord, y: ColumnRecord, colour: ColumnRecord | undefined): Safe {
  const name = (column: ColumnRecord): Safe =>
    html`${symbolHtml(column.symbol)}${NAMED.has(column.kind) && html`, ${column.meaning}`}`;
  return html`${kind} in the plane of ${name(y)}, against
  ${name(x)}${colour && html`; colour: ${name(colour)}`}.`;
}

/** Kinds of columns whose symbol does not say what they are. */
const NAMED = new Set<ColumnRecord['kind']>(['input', 'definition', 'quantity']);

function colourPhrase(colour: ColumnRecord | undefined): string {
  return colour ? `, coloured by ${nameOf(colour)}` : '';
}

function classPhrase(grid: DensityGrid): string {
  if (!grid.classes) return '';
  const { labels, counts } = grid.classes;
  const cells = grid.counts.length;
  const totals = labels.map((label, index) => {
    const total = counts.subarray(index * cells, (index + 1) * cells).reduce((sum, count) => sum + count, 0);
    return total > 0 ? `${label} ${countText(total)}` : '';
  });
  return ` Points: ${totals.filter((total) => total !== '').join(', ')}.`;
}

function absentPhrase(count: number): string {
  return count > 0 ? `; ${countText(count)} points without a value are not drawn` : '';
}

function nth(n: number): string {
  return n === 2 ? '2nd' : n === 3 ? '3rd' : `${n}th`;
}
