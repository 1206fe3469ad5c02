/** An integrator that shares nothing with the one in workers/: the oracle wherever a trajectory is checked.
 *  Source: W. B. Gragg, SIAM J. Numer. Anal. 2 (1965) 384; R. Bulirsch, J. Stoer, Numer. Math. 8 (1966) 1;
 *  as in Hairer, Norsett, Wanner, Solving Ordinary Differential Equations I, section II.9: the explicit midpoint rule
 *  with 2, 4, 6, ... substeps, extrapolated to substep zero in the square of the substep. */

export type RightHandSide = (t: number, y: Float64Array, dydt: Float64Array) => void;

const COLUMNS = 10;
const MOST_STEPS = 100_000;

/** State at t1 of y' = f(t, y), y(t0) = y0; either direction.
 *  @param tolerance  of each basic step, relative to the largest size each component has had (or 1e-30)
 *  @throws           Error if a step does not converge however short it is */
export function bulirschStoer(
  f: RightHandSide,
  t0: number,
  t1: number,
  y0: ArrayLike<number>,
  tolerance = 1e-14,
): Float64Array<ArrayBuffer> {
  let y = Float64Array.from(y0);
  const size = y.map((value) => Math.max(1e-30, Math.abs(value)));
  let t = t0;
  let h = (t1 - t0) / 16;
  for (let step = 0; step < MOST_STEPS; step++) {
    const last = Math.abs(t1 - t) <= Math.abs(h) * (1 + 1e-12);
    if (last) h = t1 - t;
    const { state, columns } = extrapolated(f, t, h, y, size, tolerance);
    if (state === undefined) {
      h /= 2;
      if (t + h === t) break;
      continue;
    }
    if (last) return state;
    y = state;
    t += h;
    y.forEach((value, i) => (size[i] = Math.max(size[i], Math.abs(value))));
    if (columns < COLUMNS - 3) h *= 1.5;
  }
  throw new Error(`no convergence at t = ${t}`);
}

/** The same at several times, in their order from t0 on. */
export function bulirschStoerAt(
  f: RightHandSide,
  t0: number,
  times: readonly number[],
  y0: ArrayLike<number>,
  tolerance = 1e-14,
): Float64Array<ArrayBuffer>[] {
  let [t, y] = [t0, Float64Array.from(y0)];
  return times.map((next) => {
    y = next === t ? y : bulirschStoer(f, t, next, y, tolerance);
    t = next;
    return y;
  });
}

/** One basic step: rows of Aitken-Neville until the last two diagonal entries agree. */
function extrapolated(
  f: RightHandSide,
  t: number,
  h: number,
  y: Float64Array<ArrayBuffer>,
  size: Float64Array,
  tolerance: number,
): { state?: Float64Array<ArrayBuffer>; columns: number } {
  let previous: Float64Array<ArrayBuffer>[] = [];
  for (let j = 0; j < COLUMNS; j++) {
    const row = [midpoint(f, t, h, y, 2 * (j + 1))];
    for (let k = 1; k <= j; k++) {
      const ratio = (j + 1) / (j + 1 - k);
      const [better, worse] = [row[k - 1], previous[k - 1]];
      row.push(better.map((value, i) => value + (value - worse[i]) / (ratio * ratio - 1)));
    }
    const [last, before] = [row[j], row[j - 1]];
    // Two entries agree in the noise of rounding, or to the tolerance, from the third row on.
    if (j >= 2 && last.every((value, i) => Math.abs(value - before[i]) <= tolerance * size[i])) {
      return { state: last, columns: j + 1 };
    }
    previous = row;
  }
  return { columns: COLUMNS };
}

/** n substeps (n even) of Gragg's midpoint rule over h: an Euler step, then leapfrogs. */
function midpoint(
  f: RightHandSide,
  t: number,
  h: number,
  y: Float64Array<ArrayBuffer>,
  n: number,
): Float64Array<ArrayBuffer> {
  const s = h / n;
  const slope = new Float64Array(y.length);
  f(t, y, slope);
  let before = y;
  let here = y.map((value, i) => value + s * slope[i]);
  for (let k = 1; k < n; k++) {
    f(t + k * s, here, slope);
    const next = before.map((value, i) => value + 2 * s * slope[i]);
    [before, here] = [here, next];
  }
  return here;
}
