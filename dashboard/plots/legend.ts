import { CLASS_COLOURS, INK } from './colours.js';
import { write, type Size } from './drawing.js';
import { upright, widthOf } from './label.js';
import { element } from './svg.js';

export interface LegendEntry {
  readonly name: string;
  /** Index into CLASS_COLOURS. */
  readonly colour: number;
}

/** Swatches with names in rows above the box; `height` is the space they need. */
export function legend(
  size: Size,
  left: number,
  entries: readonly LegendEntry[],
): { readonly height: number; readonly svg: string } {
  const row = size.text * 1.6;
  let x = left;
  let y = size.text * 0.5;
  const parts: string[] = [];
  for (const entry of entries) {
    const width = size.text * 2.6 + widthOf(upright(entry.name), size.text * 0.95);
    if (x > left && x + width > size.width) {
      x = left;
      y += row;
    }
    parts.push(
      element('rect', {
        ...classFill(entry.colour),
        x,
        y,
        width: size.text,
        height: size.text,
        stroke: INK,
        'stroke-width': 0.6,
      }),
      write(upright(entry.name), x + size.text * 1.4, y + size.text * 0.82, size.text * 0.95),
    );
    x += width;
  }
  return { height: entries.length === 0 ? 0 : y + row - size.text * 0.6, svg: parts.join('') };
}

/** Attributes of a fill in a class colour, which a dark page overrides by class. */
export function classFill(colour: number): { class: string; fill: string } {
  const index = colour % CLASS_COLOURS.day.length;
  return { class: `fill-${index}`, fill: CLASS_COLOURS.day[index] };
}

export function classStroke(colour: number): { class: string; stroke: string } {
  const index = colour % CLASS_COLOURS.day.length;
  return { class: `stroke-${index}`, stroke: CLASS_COLOURS.day[index] };
}
