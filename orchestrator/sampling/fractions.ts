const TWO_32 = 4294967296;
const TWO_MINUS_52 = 1 / 4503599627370496;

/** The midpoint of one of 2^52 equal cells of the unit interval: exact, symmetric, never 0 and never 1.
 *  @param high the upper 20 bits; @param low the lower 32 bits, as unsigned integers */
export function fraction(high: number, low: number): number {
  return (high * TWO_32 + low + 0.5) * TWO_MINUS_52;
}

/** Fills out[i] with a number in the open unit interval for point first + i. */
export type Fractions = (first: number, count: number, out: Float64Array) => void;
