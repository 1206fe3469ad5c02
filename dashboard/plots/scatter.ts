import { padded, placing, type Axis } from './axis.js';
import { colourBar, shareOf } from './colour-bar.js';
import { rampColour, toHex, type Ramp } from './colours.js';
import { colourRange } from './density.js';
import { drawing, type Box, type Setting } from './drawing.js';
import { boxOf, frame } from './frame.js';
import type { Label } from './label.js';
import { classStroke, legend } from './legend.js';
import { element, round } from './svg.js';

/** How points are coloured: all alike, by class, or along a ramp. */
export type Colouring =
  | { readonly kind: 'none' }
  | {
      readonly kind: 'classes';
      readonly values: Float64Array;
      readonly labels: readonly string[];
      readonly colours: readonly number[];
    }
  | {
      readonly kind: 'ramp';
      readonly values: Float64Array;
      readonly label: Label;
      readonly unit: Label;
      readonly scale: 'linear' | 'log';
      readonly diverging: boolean;
    };

export interface ScatterSpec {
  readonly x: Axis;
  readonly y: Axis;
  readonly xs: Float64Array;
  readonly ys: Float64Array;
  readonly colour: Colouring;
}

/** Single points; those without a place on an axis, or without a colour, are left out. */
export function scatterPlot(setting: Setting, spec: ScatterSpec): string {
  const { size } = setting;
  const draft = boxOf(size, spec.y, { legend: 0, bar: false });
  const key = legend(size, draft.left, entries(spec.colour));
  const box = boxOf(size, spec.y, { legend: key.height, bar: spec.colour.kind === 'ramp' });
  return drawing(setting, ...marks(setting, box, spec), frame(size, box, spec.x, spec.y), key.svg);
}

/** Colours along a ramp are told apart in this many steps, each drawn as one path. */
const STEPS = 24;

function entries(colour: Colouring): { name: string; colour: number }[] {
  if (colour.kind !== 'classes') return [];
  return colour.labels
    .map((name, index) => ({ name, colour: colour.colours[index], index }))
    .filter((entry) => colour.values.includes(entry.index));
}

function marks(setting: Setting, box: Box, spec: ScatterSpec): string[] {
  const { colour } = spec;
  if (colour.kind === 'none') {
    return [
      dots(
        spec,
        box,
        () => 0,
        1,
        () => ({ class: 'stroke-0', stroke: classStroke(0).stroke }),
      )[0] ?? '',
    ];
  }
  if (colour.kind === 'classes') {
    return dots(
      spec,
      box,
      (i) => colour.values[i],
      colour.labels.length,
      (k) => classStroke(colour.colours[k]),
    );
  }
  const axis = rampAxis(colour);
  const ramp: Ramp = colour.diverging ? 'diverging' : 'sequence';
  const step = (i: number): number =>
    Math.min(STEPS - 1, Math.floor(shareOf(axis, colour.values[i]) * STEPS));
  const paint = (k: number): { class: string; stroke: string } => ({
    class: `${ramp}-${k}`,
    stroke: toHex(rampColour(ramp, 'day', (k + 0.5) / STEPS)),
  });
  return [...dots(spec, box, step, STEPS, paint), colourBar(setting, box, axis, ramp)];
}

function rampAxis(colour: Extract<Colouring, { kind: 'ramp' }>): Axis {
  let low = Infinity;
  let high = -Infinity;
  for (const value of colour.values) {
    if (!Number.isFinite(value) || (colour.scale === 'log' && value <= 0)) continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  if (low > high) [low, high] = padded(low, high, colour.scale);
  return { label: colour.label, unit: colour.unit, ...colourRange(low, high, colour) };
}

/** One path per group: a line of no length with round ends is a dot, and costs a few bytes. */
function dots(
  spec: ScatterSpec,
  box: Box,
  groupOf: (index: number) => number,
  groups: number,
  paint: (group: number) => { class: string; stroke: string },
): string[] {
  const paths: string[] = Array.from({ length: groups }, () => '');
  const xAt = placing(spec.x, box.left, box.right);
  const yAt = placing(spec.y, box.bottom, box.top);
  for (let i = 0; i < spec.xs.length; i++) {
    const [x, y, group] = [xAt(spec.xs[i]), yAt(spec.ys[i]), groupOf(i)];
    const inside = x >= box.left && x <= box.right && y >= box.top && y <= box.bottom;
    if (inside && group >= 0 && group < groups) paths[group] += `M${round(x)} ${round(y)}h0`;
  }
  const width = spec.xs.length > 1500 ? 3 : spec.xs.length > 300 ? 4 : 5.5;
  return paths.map((d, group) =>
    d === ''
      ? ''
      : element('path', {
          ...paint(group),
          d,
          fill: 'none',
          'stroke-width': width,
          'stroke-linecap': 'round',
        }),
  );
}
