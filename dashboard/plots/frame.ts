import { placing, ticksOf, type Axis, type Ticks } from './axis.js';
import { INK, PAPER } from './colours.js';
import { write, type Box, type Size } from './drawing.js';
import { powerOfTen, upright, widthOf, type Label } from './label.js';
import { element, round } from './svg.js';

/** The rectangle of the data: what is left beside axis labels, a legend above and a colour bar at the right. */
export function boxOf(size: Size, y: Axis, extra: { legend: number; bar: boolean }): Box {
  const labels = ticksOf(y, 6).major.map((tick) => widthOf(tick.label, size.text * 0.9));
  const left = 12 + size.text * 1.5 + Math.max(size.text * 1.4, ...labels);
  return {
    left: Math.round(left),
    top: Math.round(size.text * 0.9 + extra.legend),
    right: Math.round(size.width - (extra.bar ? size.text * 5.4 : size.text * 1.2)),
    bottom: Math.round(size.height - size.text * 3.4),
  };
}

/** Axes around the box: ticks inwards on all four sides, numbers and labels at the left and below. */
export function frame(size: Size, box: Box, x: Axis, y: Axis): string {
  const xTicks = ticksOf(
    x,
    x.categories ? 99 : Math.max(3, Math.floor((box.right - box.left) / (size.text * 5))),
  );
  const yTicks = ticksOf(
    y,
    y.categories ? 99 : Math.max(3, Math.floor((box.bottom - box.top) / (size.text * 3.6))),
  );
  const xAt = placing(x, box.left, box.right);
  const yAt = placing(y, box.bottom, box.top);
  const middle = { x: (box.left + box.right) / 2, y: (box.top + box.bottom) / 2 };
  return [
    element('path', {
      class: 'axis',
      d: border(box) + tickMarks(box, xTicks, yTicks, xAt, yAt),
      fill: 'none',
      stroke: INK,
      'stroke-width': 1,
    }),
    ...xTicks.major.map((tick) =>
      write(tick.label, xAt(tick.value), box.bottom + size.text * 1.3, size.text * 0.9, {
        'text-anchor': 'middle',
      }),
    ),
    ...yTicks.major.map((tick) =>
      write(tick.label, box.left - size.text * 0.5, yAt(tick.value) + size.text * 0.3, size.text * 0.9, {
        'text-anchor': 'end',
      }),
    ),
    write(axisTitle(x, xTicks.factor), middle.x, size.height - size.text * 0.8, size.text * 1.08, {
      'text-anchor': 'middle',
    }),
    write(axisTitle(y, yTicks.factor), 0, 0, size.text * 1.08, {
      'text-anchor': 'middle',
      transform: `translate(${round(size.text * 1.25)} ${round(middle.y)}) rotate(-90)`,
    }),
  ].join('');
}

/** "M_t (GeV)", or "m^2 (10^6 GeV^2)" where a power of ten was taken out of the numbers. */
export function axisTitle(axis: Axis, factor: number): Label {
  const power = factor === 0 ? [] : powerOfTen(factor);
  const gap = power.length > 0 && axis.unit.length > 0 ? upright(' ') : [];
  const inside = [...power, ...gap, ...axis.unit];
  return inside.length === 0 ? axis.label : [...axis.label, ...upright('  ('), ...inside, ...upright(')')];
}

/** What lies outside the box is covered, so that marks at the edge need no clipping. */
export function surround(size: Size, box: Box): string {
  return element('path', {
    class: 'paper',
    fill: PAPER,
    'fill-rule': 'evenodd',
    d: `M0 0H${size.width}V${size.height}H0Z${border(box)}`,
  });
}

function border(box: Box): string {
  return `M${box.left} ${box.top}H${box.right}V${box.bottom}H${box.left}Z`;
}

function tickMarks(
  box: Box,
  xTicks: Ticks,
  yTicks: Ticks,
  xAt: (value: number) => number,
  yAt: (value: number) => number,
): string {
  const along = (at: number, length: number): string =>
    `M${round(at)} ${box.bottom}v${-length}M${round(at)} ${box.top}v${length}`;
  const across = (at: number, length: number): string =>
    `M${box.left} ${round(at)}h${length}M${box.right} ${round(at)}h${-length}`;
  return [
    ...xTicks.major.map((tick) => along(xAt(tick.value), 7)),
    ...xTicks.minor.map((value) => along(xAt(value), 3.5)),
    ...yTicks.major.map((tick) => across(yAt(tick.value), 7)),
    ...yTicks.minor.map((value) => across(yAt(value), 3.5)),
  ].join('');
}
