import { highWord, timesPowerOfTwo, withHighWord, withoutLowWord } from './words.js';

/** x to the power y from + - * / and sqrt alone, so that it has the same bits everywhere.
 *  @returns  special values as in ECMA-262, Number::exponentiate: pow(x, 0) = 1 even for NaN, pow(1, Infinity) = NaN,
 *            NaN for a negative x and a y that is not an integer
 *  Accuracy: below 1 unit in the last place (elementary.test.ts); exact where the result is an integer below 2^53
 *  Source:   fdlibm 5.3, e_pow.c, Sun Microsystems 1993: log2(x) and its product with y as sums of two doubles;
 *            https://www.netlib.org/fdlibm/e_pow.c. Its separate series for |y| > 2^31 is left out: there it is some
 *            hundreds of units off, the general way is not. */
export function pow(x: number, y: number): number {
  if (y === 2) return x * x;
  if (y === 1) return x;
  if (y === 0) return 1;
  if (!isFinite(x) || !isFinite(y) || x === 0) return special(x, y);
  if (y === -1) return 1 / x;
  if (x > 0) return y === 0.5 ? Math.sqrt(x) : positive(x, y);
  if (Math.floor(y) !== y) return NaN;
  return isOdd(y) ? -positive(-x, y) : positive(-x, y);
}

/** Zero and infinite bases, infinite exponents, NaN. */
function special(x: number, y: number): number {
  if (!(x === x && y === y)) return NaN;
  const size = Math.abs(x);
  if (Math.abs(y) === Infinity) return size === 1 ? NaN : size > 1 === y > 0 ? Infinity : 0;
  const result = size > 1 === y > 0 ? Infinity : 0;
  return isOdd(y) && (x < 0 || 1 / x < 0) ? -result : result;
}

function isOdd(y: number): boolean {
  const half = y / 2;
  return Math.floor(y) === y && Math.floor(half) !== half;
}

/** log2(x) as logHigh + logLow, written by `log2`; logHigh has a short fraction. */
let logHigh = 0;
let logLow = 0;

/** x > 0 and y finite. */
function positive(x: number, y: number): number {
  if (x === 1) return 1;
  log2(x);
  const yHigh = withoutLowWord(y);
  return exp2(yHigh * logHigh, (y - yHigh) * logHigh + y * logLow);
}

/** Coefficients of 3/2 (log(x) - 2 s - 2/3 s^3) in s^2, s = (x - c) / (x + c) with c = 1 or 3/2. */
const L1 = 5.99999999999994648725e-1;
const L2 = 4.28571428578550184252e-1;
const L3 = 3.33333329818377432918e-1;
const L4 = 2.72728123808534006489e-1;
const L5 = 2.30660745775561754067e-1;
const L6 = 2.06975017800338417784e-1;
/** 2 / (3 ln 2) and its two parts. */
const CP = 9.61796693925975554329e-1;
const CP_HIGH = 9.61796700954437255859e-1;
const CP_LOW = -7.02846165095275826516e-9;
/** log2(3/2) in two parts. */
const LOG2_THREE_HALVES_HIGH = 5.84962487220764160156e-1;
const LOG2_THREE_HALVES_LOW = 1.35003920212974897128e-8;
/** Fractions (upper 20 bits) of sqrt(3/2) and sqrt(3), between which c = 3/2 is the nearer centre. */
const SQRT_THREE_HALVES = 0x3988e;
const SQRT_THREE = 0xbb67a;
const SMALLEST_NORMAL = 2.2250738585072014e-308;
const TWO_53 = 9007199254740992;

function log2(x: number): void {
  const subnormal = x < SMALLEST_NORMAL;
  const normal = subnormal ? x * TWO_53 : x;
  const high = highWord(normal);
  const fraction = high & 0xfffff;
  const upper = fraction > SQRT_THREE_HALVES && fraction < SQRT_THREE;
  const carry = fraction >= SQRT_THREE ? 1 : 0;
  const n = (high >> 20) - 1023 + carry - (subnormal ? 53 : 0);
  const word = fraction | (carry === 1 ? 0x3fe00000 : 0x3ff00000);
  log2Parts(withHighWord(normal, word), word, n, upper);
}

/** log2(2^n m) for m in [sqrt(3)/2, sqrt(3)) with high word `word`; `upper` says that m is nearer to 3/2 than to 1. */
function log2Parts(m: number, word: number, n: number, upper: boolean): void {
  const c = upper ? 1.5 : 1;
  const u = m - c;
  const v = 1 / (m + c);
  const s = u * v;
  const sHigh = withoutLowWord(s);
  // m + c rounded to its upper bits, and what that leaves out: s = sHigh + sLow to twice the precision.
  const sumHigh = withHighWord(0, ((word >> 1) | 0x20000000) + 0x80000 + (upper ? 0x40000 : 0));
  const sumLow = m - (sumHigh - c);
  const sLow = v * (u - sHigh * sumHigh - sHigh * sumLow);
  const z = s * s;
  const r = z * z * (L1 + z * (L2 + z * (L3 + z * (L4 + z * (L5 + z * L6))))) + sLow * (sHigh + s);
  const square = sHigh * sHigh;
  const tHigh = withoutLowWord(3 + square + r);
  const tLow = r - (tHigh - 3 - square);
  const product = sHigh * tHigh;
  const rest = sLow * tHigh + tLow * s;
  const pHigh = withoutLowWord(product + rest);
  const pLow = rest - (pHigh - product);
  const zHigh = CP_HIGH * pHigh;
  const zLow = CP_LOW * pHigh + pLow * CP + (upper ? LOG2_THREE_HALVES_LOW : 0);
  const shift = upper ? LOG2_THREE_HALVES_HIGH : 0;
  logHigh = withoutLowWord(zHigh + zLow + shift + n);
  logLow = zLow - (logHigh - n - shift - zHigh);
}

const LN2 = 6.93147180559945286227e-1;
const LN2_HIGH = 6.93147182464599609375e-1;
const LN2_LOW = -1.90465429995776804525e-9;
/** Remez polynomial of r (e^r + 1) / (e^r - 1), as in exp.ts. */
const P1 = 1.66666666666666019037e-1;
const P2 = -2.77777777770155933842e-3;
const P3 = 6.61375632143793436117e-5;
const P4 = -1.6533902205465251539e-6;
const P5 = 4.13813679705723846039e-8;
/** Beyond these powers of two a result surely overflows or underflows; nearer to them, the last product decides. */
const LARGEST_EXPONENT = 1024;
const SMALLEST_EXPONENT = -1076;

/** 2^(high + low). */
function exp2(high: number, low: number): number {
  const sum = high + low;
  if (sum > LARGEST_EXPONENT) return Infinity;
  if (sum < SMALLEST_EXPONENT) return 0;
  const n = Math.floor(sum + 0.5);
  const rest = high - n;
  const t = withoutLowWord(low + rest);
  const u = t * LN2_HIGH;
  const v = (low - (t - rest)) * LN2 + t * LN2_LOW;
  const r = u + v;
  const tail = v - (r - u);
  const z = r * r;
  const c = r - z * (P1 + z * (P2 + z * (P3 + z * (P4 + z * P5))));
  return timesPowerOfTwo(1 - ((r * c) / (c - 2) - (tail + r * tail) - r), n);
}
