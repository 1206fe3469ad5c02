/** Natural and common logarithms from + - * / alone, so that they have the same bits everywhere.
 *  Source of all three: fdlibm 5.3 and its FreeBSD msun successors (e_log.c, s_log1p.c, e_log10.c; Sun Microsystems
 *  1993): x = 2^k (1 + f) with sqrt(1/2) <= 1 + f < sqrt(2), s = f / (2 + f), a Remez polynomial in s^2;
 *  https://www.netlib.org/fdlibm/e_log.c */
import { highWord, withHighWord, withoutLowWord } from './words.js';

/** ln 2 in two parts; the first has trailing zero bits, so that k * LN2_HIGH is exact. */
const LN2_HIGH = 6.9314718036912381649e-1;
const LN2_LOW = 1.90821492927058770002e-10;
/** log10(2) and log10(e), split the same way. */
const LOG10_2_HIGH = 3.01029995663611771306e-1;
const LOG10_2_LOW = 3.69423907715893078616e-13;
const LOG10_E_HIGH = 4.34294481878168880939e-1;
const LOG10_E_LOW = 2.50829467116452752298e-11;
/** Coefficients of (log(1 + f) - 2 s) / s in s^2. */
const L1 = 6.66666666666673513e-1;
const L2 = 3.999999999940941908e-1;
const L3 = 2.857142874366239149e-1;
const L4 = 2.222219843214978396e-1;
const L5 = 1.818357216161805012e-1;
const L6 = 1.531383769920937332e-1;
const L7 = 1.479819860511658591e-1;

const SMALLEST_NORMAL = 2.2250738585072014e-308;
/** 2^-53 */
const HALF_EPSILON = Number.EPSILON / 2;
const TWO_54 = 18014398509481984;
/** High words of 1 and of sqrt(1/2). */
const ONE = 0x3ff00000;
const SQRT_HALF = 0x3fe6a09e;

/** Natural logarithm.
 *  @returns  -Infinity at 0 and -0, NaN below 0
 *  Accuracy: below 1 unit in the last place (elementary.test.ts) */
export function log(x: number): number {
  if (!(x > 0 && x < Infinity)) return limit(x);
  const tiny = x < SMALLEST_NORMAL;
  const normal = tiny ? x * TWO_54 : x;
  const shift = exponent(normal);
  const k = tiny ? shift - 54 : shift;
  const f = mantissa(normal, shift) - 1;
  const s = f / (2 + f);
  const half = 0.5 * f * f;
  return s * (half + remainder(s)) + k * LN2_LOW - half + f + k * LN2_HIGH;
}

/** Common logarithm, exact at powers of ten.
 *  @returns  -Infinity at 0 and -0, NaN below 0
 *  Accuracy: below 1 unit in the last place (elementary.test.ts) */
export function log10(x: number): number {
  if (!(x > 0 && x < Infinity)) return limit(x);
  const tiny = x < SMALLEST_NORMAL;
  const normal = tiny ? x * TWO_54 : x;
  const shift = exponent(normal);
  const k = tiny ? shift - 54 : shift;
  const f = mantissa(normal, shift) - 1;
  const s = f / (2 + f);
  const half = 0.5 * f * f;
  const high = withoutLowWord(f - half);
  const low = f - high - half + s * (half + remainder(s));
  const product = high * LOG10_E_HIGH;
  const whole = k * LOG10_2_HIGH;
  const sum = whole + product;
  const rest = k * LOG10_2_LOW + (low + high) * LOG10_E_LOW + low * LOG10_E_HIGH;
  return rest + (whole - sum + product) + sum;
}

/** ln(1 + x), precise for small x.
 *  @returns  -Infinity at -1, NaN below -1, x itself (with its sign) below 2^-53
 *  Accuracy: below 1 unit in the last place (elementary.test.ts) */
export function log1p(x: number): number {
  if (!(x > -1 && x < Infinity)) return x === -1 ? -Infinity : x > 0 ? x : NaN;
  if (Math.abs(x) < HALF_EPSILON) return x;
  const direct = x > Math.SQRT1_2 - 1 && x < Math.SQRT2 - 1;
  const u = 1 + x;
  const k = direct ? 0 : exponent(u);
  const f = direct ? x : mantissa(u, k) - 1;
  const s = f / (2 + f);
  const half = 0.5 * f * f;
  const correction = direct ? 0 : lost(x, u, k);
  return s * (half + remainder(s)) + (k * LN2_LOW + correction) - half + f + k * LN2_HIGH;
}

/** What rounding took from u = 1 + x, as a change of log(u). */
function lost(x: number, u: number, k: number): number {
  if (k >= 54) return 0;
  return (k >= 2 ? 1 - (u - x) : x - (u - 1)) / u;
}

/** R = (log(1 + f) - 2 s) / s as a polynomial in s^2. */
function remainder(s: number): number {
  const z = s * s;
  const w = z * z;
  return z * (L1 + w * (L3 + w * (L5 + w * L7))) + w * (L2 + w * (L4 + w * L6));
}

/** k of x = 2^k m with m in [sqrt(1/2), sqrt(2)), for normal x > 0. */
function exponent(x: number): number {
  return ((highWord(x) + (ONE - SQRT_HALF)) >> 20) - 1023;
}

/** m of the same decomposition. */
function mantissa(x: number, k: number): number {
  return withHighWord(x, highWord(x) - (k << 20));
}

function limit(x: number): number {
  return x === 0 ? -Infinity : x === Infinity ? Infinity : NaN;
}
