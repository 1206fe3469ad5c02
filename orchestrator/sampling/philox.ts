const MULTIPLIER_0 = 0xd2511f53;
const MULTIPLIER_1 = 0xcd9e8d57;
const WEYL_0 = 0x9e3779b9;
const WEYL_1 = 0xbb67ae85;
const ROUNDS = 10;

/** Two 32-bit words. */
export type Key = readonly [number, number];

/** Philox4x32-10: four random 32-bit words as a function of a 128-bit counter and a 64-bit key, with no state.
 *  @param out receives four words as unsigned integers, length >= 4
 *  Source: J. Salmon, M. Moraes, R. Dror, D. Shaw, "Parallel random numbers: as easy as 1, 2, 3", SC11 (2011),
 *          section 3.3, doi:10.1145/2063384.2063405 */
export function philox(c0: number, c1: number, c2: number, c3: number, key: Key, out: Uint32Array): void {
  let [k0, k1] = key;
  for (let round = 0; round < ROUNDS; round++) {
    const high0 = multiplyHigh(MULTIPLIER_0, c0);
    const high1 = multiplyHigh(MULTIPLIER_1, c2);
    const low0 = Math.imul(MULTIPLIER_0, c0);
    c0 = high1 ^ c1 ^ k0;
    c1 = Math.imul(MULTIPLIER_1, c2);
    c2 = high0 ^ c3 ^ k1;
    c3 = low0;
    k0 = (k0 + WEYL_0) | 0;
    k1 = (k1 + WEYL_1) | 0;
  }
  out[0] = c0;
  out[1] = c1;
  out[2] = c2;
  out[3] = c3;
}

/** Upper 32 bits of the 64-bit product of two unsigned words. */
function multiplyHigh(a: number, b: number): number {
  const aHigh = a >>> 16;
  const aLow = a & 0xffff;
  const bHigh = b >>> 16;
  const bLow = b & 0xffff;
  const middle = aHigh * bLow + ((aLow * bLow) >>> 16);
  const cross = aLow * bHigh + (middle & 0xffff);
  return (aHigh * bHigh + (middle >>> 16) + (cross >>> 16)) | 0;
}
