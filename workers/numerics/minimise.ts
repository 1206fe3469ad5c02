export interface Minimum {
  readonly x: number;
  readonly value: number;
}

/** The lowest point of f on the interval the samples span: the lowest sample, refined between its neighbours.
 *  @param samples    increasing or decreasing; close enough that every valley holds one, at least one
 *  @param tolerance  wanted distance from the minimum, in the unit of x, > 0
 *  @returns  NaN for both where f is NaN at every sample
 *  Ties go to the earlier sample, so that the answer never depends on the machine. */
export function lowest(f: (x: number) => number, samples: ArrayLike<number>, tolerance: number): Minimum {
  let best = 0;
  let value = NaN;
  for (let i = 0; i < samples.length; i++) {
    const here = f(samples[i]);
    if (here < value || (here === here && !(value === value))) [best, value] = [i, here];
  }
  const sample = { x: value === value ? samples[best] : NaN, value };
  const before = samples[Math.max(0, best - 1)];
  const after = samples[Math.min(samples.length - 1, best + 1)];
  const refined = minimise(f, Math.min(before, after), Math.max(before, after), tolerance);
  return refined.value < value ? refined : sample;
}

/** (3 - sqrt(5)) / 2 */
const GOLDEN = 0.3819660112501051;
/** Below sqrt(epsilon) the values of f near a minimum no longer differ. */
const RESOLUTION = 1.4901161193847656e-8;

/** A local minimum of f between a < b.
 *  @param tolerance  wanted distance from it, in the unit of x, > 0; never better than sqrt(epsilon) |x|
 *  Source: R. P. Brent, Algorithms for Minimization without Derivatives, Prentice-Hall 1973, chapter 5, localmin:
 *          golden section, with a parabola through the three best points where that is trustworthy */
export function minimise(f: (x: number) => number, a: number, b: number, tolerance: number): Minimum {
  let [low, high] = [a, b];
  let x = a + GOLDEN * (b - a);
  let [second, third] = [x, x];
  let fx = f(x);
  let [fSecond, fThird] = [fx, fx];
  let [step, stepBefore] = [0, 0];
  for (;;) {
    const middle = 0.5 * (low + high);
    const reach = RESOLUTION * Math.abs(x) + tolerance / 3;
    if (!(Math.abs(x - middle) > 2 * reach - 0.5 * (high - low))) return { x, value: fx };
    const guess = parabola(x, second, third, fx, fSecond, fThird);
    const trusted =
      Math.abs(stepBefore) > reach &&
      Math.abs(guess) < Math.abs(0.5 * stepBefore) &&
      x + guess > low &&
      x + guess < high;
    stepBefore = trusted ? step : x < middle ? high - x : low - x;
    step = trusted ? guess : GOLDEN * stepBefore;
    const close = trusted && (x + step - low < 2 * reach || high - x - step < 2 * reach);
    if (close) step = x < middle ? reach : -reach;
    const u = x + (Math.abs(step) >= reach ? step : step > 0 ? reach : -reach);
    const fu = f(u);
    if (fu <= fx) {
      if (u < x) high = x;
      else low = x;
      [third, fThird, second, fSecond, x, fx] = [second, fSecond, x, fx, u, fu];
    } else {
      if (u < x) low = u;
      else high = u;
      if (fu <= fSecond || second === x) [third, fThird, second, fSecond] = [second, fSecond, u, fu];
      else if (fu <= fThird || third === x || third === second) [third, fThird] = [u, fu];
    }
  }
}

/** Step from x to the vertex of the parabola through three points; not finite where they lie on a line. */
function parabola(x: number, v: number, w: number, fx: number, fv: number, fw: number): number {
  const r = (x - v) * (fx - fw);
  const q = (x - w) * (fx - fv);
  return ((x - w) * q - (x - v) * r) / (-2 * (q - r));
}
