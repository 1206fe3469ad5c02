import { findRoot } from './find-root.js';

/** Every change of sign of f along the samples, in their order. A sample where f is exactly zero is passed over: what
 *  counts is the sign on either side, so that a zero that only touches is no crossing.
 *  @param samples    increasing or decreasing; step ends and points inside steps, see `subdivided`
 *  @param tolerance  wanted distance from the zero, in the unit of x, >= 0
 *  @param slope      derivative of f, in any positive unit; with it, two crossings between neighbouring samples are
 *                    found where the slope changes sign once between them
 *  Where f is NaN the search starts anew after it. */
export function crossings(
  f: (x: number) => number,
  samples: ArrayLike<number>,
  tolerance: number,
  slope?: (x: number) => number,
): number[] {
  const found: number[] = [];
  let before = NaN;
  let fBefore = NaN;
  for (let i = 0; i < samples.length; i++) {
    const here = samples[i];
    const fHere = f(here);
    if (fHere === 0) continue;
    if (opposite(fBefore, fHere)) found.push(findRoot(f, before, here, tolerance));
    else if (slope) found.push(...dip(f, before, here, fBefore, slope, tolerance));
    [before, fBefore] = [here, fHere];
  }
  return found;
}

/** Each interval of `times` cut into equal parts, the ends of intervals kept exactly. */
export function subdivided(times: ArrayLike<number>, parts: number): Float64Array {
  const samples = new Float64Array((times.length - 1) * parts + 1);
  for (let i = 0; i + 1 < times.length; i++) {
    const step = (times[i + 1] - times[i]) / parts;
    for (let j = 0; j < parts; j++) samples[i * parts + j] = times[i] + j * step;
  }
  samples[samples.length - 1] = times[times.length - 1];
  return samples;
}

/** Two crossings around the point where f turns back, if it reaches beyond zero there. */
function dip(
  f: (x: number) => number,
  a: number,
  b: number,
  fa: number,
  slope: (x: number) => number,
  tolerance: number,
): number[] {
  const [rise, fall] = [slope(a) * (b - a), slope(b) * (b - a)];
  const towardsZero = fa > 0 ? rise < 0 && fall > 0 : rise > 0 && fall < 0;
  if (!towardsZero) return [];
  const turn = findRoot(slope, a, b, tolerance);
  if (!opposite(fa, f(turn))) return [];
  return [findRoot(f, a, turn, tolerance), findRoot(f, turn, b, tolerance)];
}

function opposite(a: number, b: number): boolean {
  return a < 0 ? b > 0 : a > 0 && b < 0;
}
