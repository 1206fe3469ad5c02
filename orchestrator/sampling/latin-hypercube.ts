import type { Fractions } from './fractions.js';
import { keyOf, type Place } from './keys.js';
import { permutation } from './permutation.js';
import { uniform } from './uniform.js';

/** One coordinate of a latin hypercube of `size` points: each of `size` equal cells is hit exactly once, at a
 *  random place within the cell.
 *  Source: M. McKay, R. Beckman, W. Conover, Technometrics 21 (1979) 239. */
export function latinHypercube(size: number, place: Place): Fractions {
  const cellOf = permutation(size, keyOf(place, 'cells'));
  const jitter = uniform(place);
  return (first, count, out) => {
    jitter(first, count, out);
    for (let i = 0; i < count; i++) out[i] = placeInCell(cellOf(first + i), out[i], size);
  };
}

/** A place within one of `size` equal cells of the unit interval; below 1 also in the last one, where adding could
 *  round up.
 *  @param inside how far into the cell, in the open unit interval */
export function placeInCell(cell: number, inside: number, size: number): number {
  const end = cell + 1;
  return Math.min(cell + inside, end * (1 - Number.EPSILON / 2)) / size;
}
