import type { Light, Rgb } from './colours.js';
import type { Box, Setting } from './drawing.js';
import { pngAddress } from './png.js';
import { element } from './svg.js';

/** Paints a pixel; null leaves the paper bare. x and y run from 0 to 1 from the lower left corner. */
export type Paint = (x: number, y: number, light: Light) => Rgb | null;

/** A raster that fills the box: one image for light paper and, in a page, another for dark ones. */
export function raster(setting: Setting, box: Box, columns: number, rows: number, paint: Paint): string {
  const lights: readonly Light[] = setting.place === 'page' ? ['day', 'night'] : ['day'];
  return lights
    .map((light) =>
      element('image', {
        class: light,
        display: light === 'night' ? 'none' : undefined,
        x: box.left,
        y: box.top,
        width: box.right - box.left,
        height: box.bottom - box.top,
        preserveAspectRatio: 'none',
        href: pngAddress(columns, rows, pixels(columns, rows, light, paint)),
      }),
    )
    .join('');
}

function pixels(columns: number, rows: number, light: Light, paint: Paint): Uint8Array {
  const rgba = new Uint8Array(columns * rows * 4);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const colour = paint((column + 0.5) / columns, 1 - (row + 0.5) / rows, light);
      if (colour) rgba.set([colour[0], colour[1], colour[2], 255], (row * columns + column) * 4);
    }
  }
  return rgba;
}
