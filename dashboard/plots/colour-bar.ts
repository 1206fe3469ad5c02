import { placing, ticksOf, type Axis } from './axis.js';
import { INK, rampColour, type Ramp } from './colours.js';
import { write, type Box, type Setting } from './drawing.js';
import { axisTitle } from './frame.js';
import { createRaster, rasterImages, type Raster } from './raster.js';
import { element, round } from './svg.js';

/** The scale of a colour: a bar at the right of the box with ticks, numbers and a label. */
export function colourBar(setting: Setting, box: Box, axis: Axis, ramp: Ramp): string {
  const { text, width } = setting.size;
  const bar: Box = {
    left: box.right + text,
    right: box.right + text * 1.8,
    top: box.top,
    bottom: box.bottom,
  };
  const at = placing(axis, bar.bottom, bar.top);
  const ticks = ticksOf(axis, 6);
  return [
    rasterImages(setting, bar, RAMPS[ramp]),
    element('path', {
      class: 'axis',
      fill: 'none',
      stroke: INK,
      d:
        `M${bar.left} ${bar.top}H${round(bar.right)}V${bar.bottom}H${bar.left}Z` +
        ticks.major.map((tick) => `M${round(bar.right)} ${round(at(tick.value))}h-4`).join(''),
    }),
    ...ticks.major.map((tick) =>
      write(tick.label, bar.right + text * 0.3, at(tick.value) + text * 0.3, text * 0.85),
    ),
    write(axisTitle(axis, ticks.factor), 0, 0, text, {
      'text-anchor': 'middle',
      transform: `translate(${round(width - text * 0.4)} ${round((bar.top + bar.bottom) / 2)}) rotate(-90)`,
    }),
  ].join('');
}

const RAMPS: Readonly<Record<Ramp, Raster>> = {
  sequence: createRaster(1, 128, (light) => (_x, y) => rampColour('sequence', light, y)),
  diverging: createRaster(1, 128, (light) => (_x, y) => rampColour('diverging', light, y)),
};

/** Where a value lies on the colour scale, from 0 to 1. */
export function shareOf(axis: Axis, value: number): number {
  return placing(axis, 0, 1)(value);
}
