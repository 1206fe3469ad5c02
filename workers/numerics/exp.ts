import { timesPowerOfTwo } from './words.js';

const OVERFLOW = 709.782712893383973096;
const UNDERFLOW = -745.13321910194110842;
const INVERSE_LN2 = 1.4426950408889634;
/** ln 2 in two parts; the first has 21 trailing zero bits, so that k * LN2_HIGH is exact. */
const LN2_HIGH = 6.9314718036912381649e-1;
const LN2_LOW = 1.90821492927058770002e-10;
/** Remez polynomial of r (e^r + 1) / (e^r - 1) in r^2 on |r| <= ln(2)/2. */
const P1 = 1.66666666666666019037e-1;
const P2 = -2.77777777770155933842e-3;
const P3 = 6.61375632143793436117e-5;
const P4 = -1.6533902205465251539e-6;
const P5 = 4.13813679705723846039e-8;

/** e^x from + - * / alone, so that it has the same bits everywhere.
 *  @returns  0 below -745.13, Infinity above 709.78, NaN for NaN
 *  Accuracy: below 1 unit in the last place (elementary.test.ts)
 *  Source:   fdlibm 5.3, e_exp.c, Sun Microsystems 1993: argument reduction x = k ln2 + r and a rational
 *            approximation of e^r; https://www.netlib.org/fdlibm/e_exp.c */
export function exp(x: number): number {
  if (!(x <= OVERFLOW)) return x > OVERFLOW ? Infinity : NaN;
  if (x < UNDERFLOW) return 0;
  const k = Math.abs(x) > 0.5 * Math.LN2 ? Math.floor(INVERSE_LN2 * x + 0.5) : 0;
  const high = x - k * LN2_HIGH;
  const low = k * LN2_LOW;
  const r = high - low;
  const z = r * r;
  const c = r - z * (P1 + z * (P2 + z * (P3 + z * (P4 + z * P5))));
  return timesPowerOfTwo(1 - (low - (r * c) / (2 - c) - high), k);
}
