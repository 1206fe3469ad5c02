import { denseComponent, denseState, prepareDense } from './dop853-dense.js';
import { attempt, createScratch, createSlot, errorOf } from './dop853-step.js';
import type { Derivative, Slot } from './dop853-step.js';

export type { Derivative } from './dop853-step.js';

/** How an integration ended; everything but 'done' leaves the trajectory up to `reached` usable. */
export type Dop853Status = 'done' | 'stopped' | 'max-steps' | 'step-too-small' | 'not-finite';

export interface Dop853Settings {
  /** Relative tolerance of a step, dimensionless, > 0; the global error is some ten times larger. */
  readonly rtol: number;
  /** Absolute tolerance of a step in units of y, > 0. */
  readonly atol: number;
  /** Ceiling on attempted steps, accepted and rejected together. */
  readonly maxSteps: number;
  /** Asked after every accepted step; true ends the integration there as 'stopped'. */
  readonly stop?: (t: number, y: Float64Array) => boolean;
}

/** An integrator with the trajectory of its last integration; buffers are reused by the next one. */
export interface Dop853 {
  /** Integrates y' = f(t, y) from t0 to t1 (either direction).
   *  @param y0  initial state, shape (n,); copied
   *  @throws    RangeError if rtol <= 0, atol <= 0 or y0 has another length than n
   *  Fails as data: see Dop853Status; 'not-finite' means y0 or its derivative is not finite, or no step was short
   *  enough to keep the stages finite */
  integrate(t0: number, t1: number, y0: ArrayLike<number>, settings: Dop853Settings): Dop853Status;
  /** Accepted steps. */
  readonly steps: number;
  /** Calls of f so far in this trajectory, those of dense output included. */
  readonly evaluations: number;
  /** Ends of the accepted steps in order, t0 first; shape (steps + 1,). */
  readonly times: Float64Array;
  /** The last of `times`. */
  readonly reached: number;
  /** State at t, shape (n,), order 7 inside steps; NaN outside the interval reached.
   *  Calls f where a step is asked about for the first time: f must still be the same function. */
  at(t: number, out: Float64Array): void;
  /** The same for one component. */
  component(i: number, t: number): number;
}

/** Explicit Runge-Kutta pair of order 8(5,3) by Dormand and Prince for smooth, non-stiff systems of n equations.
 *  @param f    right-hand side, a pure function; it may write NaN or Infinity, which shortens the step
 *  Accuracy:   global error some 10 rtol on the problems of dop853.test.ts
 *  Source:     E. Hairer, S. P. Norsett, G. Wanner, Solving Ordinary Differential Equations I, 2nd revised edition,
 *              Springer 1993, sections II.4 to II.6, II.10, doi:10.1007/978-3-540-78862-1 */
export function createDop853(n: number, f: Derivative): Dop853 {
  return new Integrator(n, f);
}

const SAFETY = 0.9;
const SHRINK = 0.2;
const GROW = 8;
/** A step shorter than this times |t| no longer moves t reliably. */
const SHORTEST = 16 * Number.EPSILON;

class Integrator implements Dop853 {
  steps = 0;
  evaluations = 0;
  private readonly slots: Slot[] = [];
  private readonly scratch;
  private readonly nowhere;
  private boundaries = new Float64Array(64);
  private direction = 1;

  constructor(
    private readonly n: number,
    private readonly f: Derivative,
  ) {
    this.scratch = createScratch(n);
    this.nowhere = new Float64Array(n).fill(NaN);
  }

  get times(): Float64Array {
    return this.boundaries.subarray(0, this.steps + 1);
  }

  get reached(): number {
    return this.boundaries[this.steps];
  }

  integrate(t0: number, t1: number, y0: ArrayLike<number>, settings: Dop853Settings): Dop853Status {
    this.begin(t0, t1, y0, settings);
    if (!isFinite(t1 - t0) || !allFinite(this.slots[0])) return 'not-finite';
    return t1 === t0 ? 'done' : this.march(t1, this.firstStep(t1 - t0, settings), settings);
  }

  at(t: number, out: Float64Array): void {
    const step = this.stepAt(t);
    const x = this.fraction(step, t);
    const knot = this.knot(step, x);
    if (knot) for (let i = 0; i < this.n; i++) out[i] = knot[i];
    else denseState(this.slots[step], x, out);
  }

  component(i: number, t: number): number {
    const step = this.stepAt(t);
    const x = this.fraction(step, t);
    const knot = this.knot(step, x);
    return knot ? knot[i] : denseComponent(this.slots[step], i, x);
  }

  private begin(t0: number, t1: number, y0: ArrayLike<number>, { rtol, atol }: Dop853Settings): void {
    if (!(rtol > 0)) throw new RangeError(`expected rtol > 0, got ${rtol}`);
    if (!(atol > 0)) throw new RangeError(`expected atol > 0, got ${atol}`);
    if (y0.length !== this.n) throw new RangeError(`expected ${this.n} initial values, got ${y0.length}`);
    this.steps = 0;
    this.boundaries[0] = t0;
    this.direction = t1 < t0 ? -1 : 1;
    const first = this.slot(0);
    first.y.set(y0);
    this.f(t0, first.y, first.k1);
    this.evaluations = 1;
  }

  /** Steps until t1; h is the length tried first, with its sign. */
  private march(t1: number, h: number, settings: Dop853Settings): Dop853Status {
    let t = this.boundaries[0];
    let error = 0;
    let rejected = false;
    for (let attempts = 0; attempts < settings.maxSteps; attempts++) {
      if (!(Math.abs(h) > Math.abs(t) * SHORTEST)) return isFinite(error) ? 'step-too-small' : 'not-finite';
      const last = (t + 1.01 * h - t1) * this.direction > 0;
      if (last) h = t1 - t;
      error = this.tryStep(t, h, settings);
      const accepted = error <= 1;
      if (accepted) {
        t = last ? t1 : t + h;
        this.accept(t);
        if (settings.stop?.(t, this.slots[this.steps].y)) return 'stopped';
        if (last) return 'done';
      }
      const factor = stepFactor(error);
      h *= rejected ? Math.min(1, factor) : factor;
      rejected = !accepted;
    }
    return 'max-steps';
  }

  /** Error of a step from the current end in units of the tolerance; its result waits in the next slot. */
  private tryStep(t: number, h: number, { rtol, atol }: Dop853Settings): number {
    const slot = this.slots[this.steps];
    const next = this.slot(this.steps + 1);
    attempt(this.f, t, h, slot, this.scratch, next.y);
    this.evaluations += 11;
    const error = errorOf(h, slot, this.scratch, next.y, rtol, atol);
    if (!(error <= 1)) return error;
    this.f(t + h, next.y, next.k1);
    this.evaluations++;
    return allFinite(next) ? error : Infinity;
  }

  private accept(t: number): void {
    this.slots[this.steps].denseReady = false;
    this.steps++;
    if (this.steps === this.boundaries.length) this.boundaries = doubled(this.boundaries);
    this.boundaries[this.steps] = t;
  }

  private slot(i: number): Slot {
    if (i === this.slots.length) this.slots.push(createSlot(this.n));
    return this.slots[i];
  }

  /** Source: Hairer, Norsett, Wanner I, section II.4, "starting step size", with order 8. */
  private firstStep(span: number, { rtol, atol }: Dop853Settings): number {
    const { y, k1 } = this.slots[0];
    const { w, k2 } = this.scratch;
    const size = scaledNorm(y, y, rtol, atol);
    const slope = scaledNorm(k1, y, rtol, atol);
    const guess = size < 1e-5 || slope < 1e-5 ? 1e-6 : (0.01 * size) / slope;
    const h = Math.min(guess, Math.abs(span)) * this.direction;
    for (let i = 0; i < this.n; i++) w[i] = y[i] + h * k1[i];
    this.f(this.boundaries[0] + h, w, k2);
    this.evaluations++;
    for (let i = 0; i < this.n; i++) w[i] = (k2[i] - k1[i]) / h;
    const bend = Math.max(slope, scaledNorm(w, y, rtol, atol));
    const second = bend <= 1e-15 ? Math.max(1e-6, Math.abs(h) * 1e-3) : eighthRoot(0.01 / bend);
    const length = Math.min(100 * Math.abs(h), second, Math.abs(span));
    return (length > 0 ? length : Math.abs(h)) * this.direction;
  }

  /** Index of the step that holds t, or -1. */
  private stepAt(t: number): number {
    const { boundaries, direction } = this;
    if (!((t - boundaries[0]) * direction >= 0 && (this.reached - t) * direction >= 0)) return -1;
    let low = 0;
    let high = this.steps;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if ((t - boundaries[middle]) * direction >= 0) low = middle;
      else high = middle;
    }
    return low;
  }

  /** Where in its step t lies: 0 to 1, both exact at the ends; makes the dense output of that step ready. */
  private fraction(step: number, t: number): number {
    if (step < 0 || t === this.boundaries[step]) return 0;
    const [start, end] = [this.boundaries[step], this.boundaries[step + 1]];
    if (t === end) return 1;
    const slot = this.slots[step];
    if (!slot.denseReady) {
      prepareDense(this.f, start, end - start, slot, this.slots[step + 1], this.scratch);
      this.evaluations += 3;
    }
    return (t - start) / (end - start);
  }

  /** The state at an end of a step, which needs no polynomial, or outside all steps. */
  private knot(step: number, x: number): Float64Array | undefined {
    if (step < 0) return this.nowhere;
    return x === 0 ? this.slots[step].y : x === 1 ? this.slots[step + 1].y : undefined;
  }
}

/** Between 0.2 and 8: 0.9 error^(-1/8), by square roots only. */
function stepFactor(error: number): number {
  const wanted = SAFETY / eighthRoot(error);
  return wanted > SHRINK ? Math.min(GROW, wanted) : SHRINK;
}

function eighthRoot(x: number): number {
  return Math.sqrt(Math.sqrt(Math.sqrt(x)));
}

/** Root mean square of x in units of the tolerance at y. */
function scaledNorm(x: Float64Array, y: Float64Array, rtol: number, atol: number): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) {
    const scaled = x[i] / (atol + rtol * Math.abs(y[i]));
    sum += scaled * scaled;
  }
  return Math.sqrt(sum / x.length);
}

function allFinite({ y, k1 }: Slot): boolean {
  let probe = 0;
  for (let i = 0; i < y.length; i++) probe += 0 * y[i] + 0 * k1[i];
  return probe === 0;
}

function doubled(array: Float64Array): Float64Array<ArrayBuffer> {
  const longer = new Float64Array(2 * array.length);
  longer.set(array);
  return longer;
}
