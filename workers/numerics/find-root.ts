/** A zero of a continuous f between a and b, where its signs differ.
 *  @param tolerance  wanted distance from the zero, in the unit of x, >= 0
 *  @returns  x with a change of sign within tolerance + 4 epsilon |x|; NaN if f(a) and f(b) have the same sign or f is NaN
 *            at a point it is asked about
 *  Convergence is certain (no more than the square of the number of bisections), usually superlinear.
 *  Source: R. P. Brent, Algorithms for Minimization without Derivatives, Prentice-Hall 1973, chapter 4, procedure zero */
export function findRoot(f: (x: number) => number, a: number, b: number, tolerance: number): number {
  let [worse, best] = [a, b];
  let [fWorse, fBest] = [f(a), f(b)];
  if (fWorse === 0) return a;
  if (fBest === 0) return b;
  if (!(fWorse < 0 ? fBest > 0 : fWorse > 0 && fBest < 0)) return NaN;
  let [opposite, fOpposite] = [worse, fWorse];
  let [step, stepBefore] = [best - worse, best - worse];
  for (;;) {
    if (fBest < 0 === fOpposite < 0) {
      [opposite, fOpposite] = [worse, fWorse];
      step = stepBefore = best - worse;
    }
    if (Math.abs(fOpposite) < Math.abs(fBest)) {
      [worse, best, opposite] = [best, opposite, best];
      [fWorse, fBest, fOpposite] = [fBest, fOpposite, fBest];
    }
    const reach = 2 * Number.EPSILON * Math.abs(best) + 0.5 * tolerance;
    const half = 0.5 * (opposite - best);
    if (Math.abs(half) <= reach || fBest === 0) return best;
    const guess = interpolated(half, worse === opposite, fWorse, fBest, fOpposite, best - worse);
    const trusted =
      Math.abs(stepBefore) >= reach &&
      Math.abs(fWorse) > Math.abs(fBest) &&
      guess / half > 0 &&
      Math.abs(guess) < Math.min(1.5 * Math.abs(half) - 0.5 * reach, 0.5 * Math.abs(stepBefore));
    [stepBefore, step] = trusted ? [step, guess] : [half, half];
    [worse, fWorse] = [best, fBest];
    best += Math.abs(step) > reach ? step : half > 0 ? reach : -reach;
    fBest = f(best);
    if (!(fBest === fBest)) return NaN;
  }
}

/** Step from the best point to the zero of the line, or of the inverse parabola, through the last points. */
function interpolated(
  half: number,
  twoPoints: boolean,
  fWorse: number,
  fBest: number,
  fOpposite: number,
  back: number,
): number {
  const s = fBest / fWorse;
  if (twoPoints) return (2 * half * s) / (s - 1);
  const q = fWorse / fOpposite;
  const r = fBest / fOpposite;
  const p = s * (2 * half * q * (q - r) - back * (r - 1));
  return -p / ((q - 1) * (r - 1) * (s - 1));
}
