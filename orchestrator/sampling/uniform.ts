import { fraction, type Fractions } from './fractions.js';
import { keyOf, type Place } from './keys.js';
import { philox } from './philox.js';

const TWO_32 = 4294967296;

/** Independent uniform numbers: 52 bits of Philox at the counter of the point. */
export function uniform(place: Place): Fractions {
  const key = keyOf(place, 'points');
  const words = new Uint32Array(4);
  return (first, count, out) => {
    for (let i = 0; i < count; i++) {
      const index = first + i;
      philox(index | 0, Math.floor(index / TWO_32), 0, 0, key, words);
      out[i] = fraction(words[1] >>> 12, words[0]);
    }
  };
}
