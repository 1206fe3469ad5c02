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
    for (let i = 0; i < count; i++) {
      const cell = cellOf(first + i);
      const inside = cell + out[i];
      out[i] = (inside < cell + 1 ? inside : beforeNext(cell)) / size;
    }
  };
}

/** The largest double below cell + 1, where adding the jitter was rounded up. */
function beforeNext(cell: number): number {
  return (cell + 1) * (1 - 2 ** -53);
}
