import { placing, type Axis } from './axis.js';
import { FAINT } from './colours.js';
import { drawing, write, type Box, type Setting } from './drawing.js';
import { boxOf, frame } from './frame.js';
import { widthOf, type Label } from './label.js';
import { classStroke } from './legend.js';
import { element, round } from './svg.js';

export interface Series {
  readonly label: Label;
  /** One value an entry of `xs`; NaN breaks the line. */
  readonly values: readonly number[];
  /** Index into CLASS_COLOURS; also chooses the dashes. */
  readonly colour: number;
}

export interface LinesSpec {
  readonly x: Axis;
  readonly y: Axis;
  readonly xs: readonly number[];
  readonly series: readonly Series[];
}

/** Lines named where they end, so that no legend has to be matched by colour. */
export function linesPlot(setting: Setting, spec: LinesSpec): string {
  const { size } = setting;
  const plain = boxOf(size, spec.y, { legend: 0, bar: false });
  const names = Math.max(...spec.series.map((series) => widthOf(series.label, size.text)), 0);
  const box: Box = { ...plain, right: Math.round(plain.right - names - size.text * 0.5) };
  const xAt = placing(spec.x, box.left, box.right);
  const yAt = placing(spec.y, box.bottom, box.top);
  return drawing(
    setting,
    zeroLine(spec.y, box, yAt),
    ...spec.series.map((series) => path(series, spec.xs, xAt, yAt)),
    ...endNames(spec, box, size.text, xAt, yAt),
    frame(size, box, spec.x, spec.y),
  );
}

const DASHES = [undefined, '8 4', '2 3', '10 3 2 3', '5 2.5', '14 4', '4 2 1 2'];

function zeroLine(y: Axis, box: Box, yAt: (value: number) => number): string {
  if (y.scale === 'log' || y.low >= 0 || y.high <= 0) return '';
  const d = `M${box.left} ${round(yAt(0))}H${box.right}`;
  return element('path', { class: 'zero', d, stroke: FAINT, 'stroke-width': 1, fill: 'none' });
}

function path(
  series: Series,
  xs: readonly number[],
  xAt: (value: number) => number,
  yAt: (value: number) => number,
): string {
  let d = '';
  let drawing = false;
  for (let i = 0; i < xs.length; i++) {
    const finite = Number.isFinite(series.values[i]);
    if (finite) d += `${drawing ? 'L' : 'M'}${round(xAt(xs[i]))} ${round(yAt(series.values[i]))}`;
    drawing = finite;
  }
  return element('path', {
    ...classStroke(series.colour),
    d,
    fill: 'none',
    'stroke-width': 2,
    'stroke-linejoin': 'round',
    'stroke-dasharray': DASHES[series.colour % DASHES.length],
  });
}

/** Names where the lines end, pushed apart where they would overlap. */
function endNames(
  spec: LinesSpec,
  box: Box,
  text: number,
  xAt: (value: number) => number,
  yAt: (value: number) => number,
): string[] {
  const ends = spec.series
    .map((series) => ({ series, last: series.values.findLastIndex((value) => Number.isFinite(value)) }))
    .filter(({ last }) => last >= 0)
    .map(({ series, last }) => ({ series, x: xAt(spec.xs[last]), y: yAt(series.values[last]) }))
    .sort((a, b) => a.y - b.y);
  spread(ends, text * 1.15, box);
  return ends.map(({ series, x, y }) => write(series.label, x + text * 0.45, y + text * 0.3, text));
}

function spread(ends: { y: number }[], gap: number, box: Box): void {
  for (let i = 1; i < ends.length; i++) ends[i].y = Math.max(ends[i].y, ends[i - 1].y + gap);
  let limit = box.bottom;
  for (let i = ends.length - 1; i >= 0 && ends[i].y > limit; i--, limit -= gap) ends[i].y = limit;
}
