import { fraction, type Fractions } from './fractions.js';
import { keyOf, type Place } from './keys.js';
import { philox } from './philox.js';
import { DIRECTIONS } from './sobol-directions.js';

/** Bits of a coordinate. */
const BITS = 52;
/** Bits of an index: a stratum may hold 2^32 points. */
const INDEX_BITS = 32;

export const SOBOL_DIMENSIONS = DIRECTIONS.length;

/** One coordinate of Sobol's sequence under a random linear scramble and a digital shift: every coordinate is
 *  uniform, and every elementary interval keeps its share of points. Points come in Gray-code order.
 *  Sources: I. Sobol, USSR Comput. Math. Math. Phys. 7 (1967) 86; I. Antonov and V. Saleev, ibid. 19 (1979) 252
 *  (order); A. Owen, "Randomly permuted (t,m,s)-nets and (t,s)-sequences" (1995), in the linear form of
 *  J. Matousek, "On the L2-discrepancy for anchored boxes", J. Complexity 14 (1998) 527. */
export function sobol(dimension: number, place: Place): Fractions {
  const scramble = linearScramble(directions(dimension), place);
  return (first, count, out) => {
    let { high, low } = pointAt(first, scramble);
    for (let i = 0; i < count; i++) {
      out[i] = fraction(high, low >>> 0);
      const bit = trailingZeros(first + i + 1);
      high ^= scramble.high[bit];
      low ^= scramble.low[bit];
    }
  };
}

/** Direction numbers of one dimension as 32-bit words: entry j is the top 32 bits of m_(j+1) / 2^(j+1). */
export function directions(dimension: number): Uint32Array {
  const { polynomial, m } = DIRECTIONS[dimension];
  const degree = 31 - Math.clz32(polynomial);
  const v = new Uint32Array(INDEX_BITS);
  for (let j = 0; j < INDEX_BITS; j++) {
    if (dimension === 0) v[j] = 1 << (31 - j);
    else if (j < degree) v[j] = m[j] << (31 - j);
    else v[j] = recurrence(v, j, polynomial, degree);
  }
  return v;
}

function recurrence(v: Uint32Array, j: number, polynomial: number, degree: number): number {
  let word = v[j - degree] ^ (v[j - degree] >>> degree);
  for (let k = 1; k < degree; k++) if ((polynomial >>> (degree - k)) & 1) word ^= v[j - k];
  return word;
}

/** Scrambled direction numbers and shift, 52 bits as 20 + 32. */
interface Scramble {
  readonly high: Int32Array;
  readonly low: Int32Array;
  readonly shiftHigh: number;
  readonly shiftLow: number;
}

/** Multiplies by a random lower triangular matrix with a unit diagonal. Row r of the matrix gives bit r of a
 *  coordinate, counted from the most significant one; columns past 32 meet only zeros and are left out. */
function linearScramble(v: Uint32Array, place: Place): Scramble {
  const random = words(BITS + 2, place);
  const high = new Int32Array(INDEX_BITS);
  const low = new Int32Array(INDEX_BITS);
  for (let row = 0; row < BITS; row++) {
    const mask = row < 32 ? keepTop(random[row], row) | (1 << (31 - row)) : random[row];
    for (let j = 0; j < INDEX_BITS; j++) {
      const bit = parity(mask & v[j]);
      if (row < 20) high[j] |= bit << (19 - row);
      else low[j] |= bit << (51 - row);
    }
  }
  return { high, low, shiftHigh: random[BITS] >>> 12, shiftLow: random[BITS + 1] };
}

/** The first `count` of the most significant bits. */
function keepTop(word: number, count: number): number {
  return count === 0 ? 0 : word & (-1 << (32 - count));
}

function parity(word: number): number {
  let bits = word;
  for (let shift = 16; shift > 0; shift >>= 1) bits ^= bits >>> shift;
  return bits & 1;
}

function words(count: number, place: Place): Uint32Array {
  const key = keyOf(place, 'scramble');
  const out = new Uint32Array(4 * Math.ceil(count / 4));
  for (let i = 0; i < out.length; i += 4) philox(i / 4, 0, 0, 0, key, out.subarray(i, i + 4));
  return out;
}

function pointAt(index: number, scramble: Scramble): { high: number; low: number } {
  let high = scramble.shiftHigh;
  let low = scramble.shiftLow;
  const gray = index ^ (index >>> 1);
  for (let j = 0; j < INDEX_BITS; j++) {
    if (((gray >>> j) & 1) === 0) continue;
    high ^= scramble.high[j];
    low ^= scramble.low[j];
  }
  return { high, low };
}

function trailingZeros(n: number): number {
  return 31 - Math.clz32(n & -n);
}
