/** The two 32-bit words of a float64, on machines of either byte order. */

const double = new Float64Array(1);
const words = new Int32Array(double.buffer);
const HIGH = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1 ? 1 : 0;
const LOW = 1 - HIGH;

/** Sign, exponent and the upper 20 bits of the fraction, as a signed 32-bit integer. */
export function highWord(x: number): number {
  double[0] = x;
  return words[HIGH];
}

/** x with its high word replaced. */
export function withHighWord(x: number, high: number): number {
  double[0] = x;
  words[HIGH] = high;
  return double[0];
}

/** x with the lower 32 bits of its fraction set to zero, so that products of such numbers are exact sooner. */
export function withoutLowWord(x: number): number {
  double[0] = x;
  words[LOW] = 0;
  return double[0];
}

/** y * 2^k for y near 1, rounded once even where the result is subnormal or overflows. */
export function timesPowerOfTwo(y: number, k: number): number {
  if (k === 0) return y;
  if (k < -1021) return y * powerOfTwo(k + 1000) * TINY;
  return k > 1023 ? y * 2 * powerOfTwo(1023) : y * powerOfTwo(k);
}

/** 2^k exactly, for a normal result: -1022 <= k <= 1023. */
function powerOfTwo(k: number): number {
  return withHighWord(0, (k + 1023) << 20);
}
const TINY = powerOfTwo(-1000);
