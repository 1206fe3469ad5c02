import type { Light, Rgb } from './colours.js';
import type { Box, Setting } from './drawing.js';
import { pngAddress } from './png.js';
import { element } from './svg.js';

/** Paints a pixel; null leaves the paper bare. x and y run from 0 to 1 from the lower left corner. */
export type Paint = (x: number, y: number) => Rgb | null;

/** A painted rectangle, as the address of a PNG for each light. It does not depend on the size it is shown at, so
 *  one raster serves all drawings of a figure. */
export type Raster = (light: Light) => string;

/** Every light is painted when it is first asked for, and kept. */
export function createRaster(columns: number, rows: number, paintFor: (light: Light) => Paint): Raster {
  const painted = new Map<Light, string>();
  return (light) => {
    const address = painted.get(light) ?? pngAddress(columns, rows, pixels(columns, rows, paintFor(light)));
    painted.set(light, address);
    return address;
  };
}

/** The raster in its box: one image for light paper and, in a page, another for dark ones. */
export function rasterImages(setting: Setting, box: Box, raster: Raster): string {
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
        href: raster(light),
      }),
    )
    .join('');
}

function pixels(columns: number, rows: number, paint: Paint): Uint8Array {
  const rgba = new Uint8Array(columns * rows * 4);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const colour = paint((column + 0.5) / columns, 1 - (row + 0.5) / rows);
      if (colour === null) continue;
      const at = (row * columns + column) * 4;
      rgba[at] = colour[0];
      rgba[at + 1] = colour[1];
      rgba[at + 2] = colour[2];
      rgba[at + 3] = 255;
    }
  }
  return rgba;
}
