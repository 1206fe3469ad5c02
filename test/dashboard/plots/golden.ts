import { createHash } from 'node:crypto';
import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { expect } from 'vitest';
import { decode } from './decode-png.js';

const place = new URL('../../golden/plots/', import.meta.url);

/** Compares a drawing with the one kept in test/golden/plots. Coordinates have two decimals already; a raster is
 *  compared by its pixels, because zlib may pack the same pixels in other ways. Where they differ, the new drawing is
 *  left beside the old one as NAME-changed.svg: look at both, and replace the old one if the change is wanted. */
export function expectGolden(name: string, svg: string): void {
  const kept = new URL(`${name}.svg`, place);
  const changed = new URL(`${name}-changed.svg`, place);
  const same = existsSync(kept) && comparable(readFileSync(kept, 'utf8')) === comparable(svg);
  if (same) rmSync(changed, { force: true });
  else writeFileSync(changed, svg);
  expect(same, `${name}.svg differs: see ${name}-changed.svg beside it`).toBe(true);
}

function comparable(svg: string): string {
  return svg.trim().replace(/data:image\/png;base64,([A-Za-z0-9+/=]+)/g, (_, data: string) => {
    const { width, height, rgba } = decode(Buffer.from(data, 'base64'));
    return `${width}x${height} ${createHash('sha256').update(rgba).digest('hex')}`;
  });
}
