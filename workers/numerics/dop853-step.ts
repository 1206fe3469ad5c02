/** One attempted step of DOP853 and its error estimate: the loop everything else waits for. */
import * as T from './dop853-tableau.js';

// Copied, because the optimiser turns constants of this module into literals, those of others not: a third faster.
const { c2, c3, c4, c5, c6, c7, c8, c9, c10, c11 } = T;
const { a2_1 } = T;
const { a3_1, a3_2 } = T;
const { a4_1, a4_3 } = T;
const { a5_1, a5_3, a5_4 } = T;
const { a6_1, a6_4, a6_5 } = T;
const { a7_1, a7_4, a7_5, a7_6 } = T;
const { a8_1, a8_4, a8_5, a8_6, a8_7 } = T;
const { a9_1, a9_4, a9_5, a9_6, a9_7, a9_8 } = T;
const { a10_1, a10_4, a10_5, a10_6, a10_7, a10_8, a10_9 } = T;
const { a11_1, a11_4, a11_5, a11_6, a11_7, a11_8, a11_9, a11_10 } = T;
const { a12_1, a12_4, a12_5, a12_6, a12_7, a12_8, a12_9, a12_10, a12_11 } = T;
const { b1, b6, b7, b8, b9, b10, b11, b12 } = T;
const { bhat1, bhat9, bhat12 } = T;
const { e1, e6, e7, e8, e9, e10, e11, e12 } = T;

/** Right-hand side of y' = f(t, y): writes dy/dt into `dydt`, both of shape (n,). Must be a pure function. */
export type Derivative = (t: number, y: Float64Array, dydt: Float64Array) => void;

/** What is kept of an accepted step so that its dense output can be computed when someone asks. */
export interface Slot {
  /** State at the start of the step; k1 its derivative. */
  readonly y: Float64Array;
  readonly k1: Float64Array;
  readonly k6: Float64Array;
  readonly k7: Float64Array;
  readonly k8: Float64Array;
  readonly k9: Float64Array;
  readonly k10: Float64Array;
  readonly k11: Float64Array;
  readonly k12: Float64Array;
  /** Coefficients of the dense polynomial, shape (8, n) row-major, valid where `denseReady`. */
  readonly dense: Float64Array;
  denseReady: boolean;
}

/** Stages that nothing needs after the step, and a state to evaluate the next stage at. */
export interface Scratch {
  readonly w: Float64Array;
  readonly k2: Float64Array;
  readonly k3: Float64Array;
  readonly k4: Float64Array;
  readonly k5: Float64Array;
}

/** Views into one buffer, so that a slot costs one allocation. */
export function createSlot(n: number): Slot {
  const buffer = new Float64Array(17 * n);
  const view = (i: number): Float64Array => buffer.subarray(i * n, (i + 1) * n);
  const [y, k1, k6, k7] = [view(0), view(1), view(2), view(3)];
  const [k8, k9, k10, k11, k12] = [view(4), view(5), view(6), view(7), view(8)];
  return { y, k1, k6, k7, k8, k9, k10, k11, k12, dense: buffer.subarray(9 * n), denseReady: false };
}

export function createScratch(n: number): Scratch {
  const empty = (): Float64Array => new Float64Array(n);
  return { w: empty(), k2: empty(), k3: empty(), k4: empty(), k5: empty() };
}

/** Stages 2 to 12 of a step of length h from (t, slot.y, slot.k1), then the state of order 8 at t + h into `next`.
 *  One straight line of loops: the optimiser keeps everything in registers, and the right-hand side stays a
 *  function of its own. */
export function attempt(
  f: Derivative,
  t: number,
  h: number,
  slot: Slot,
  scratch: Scratch,
  next: Float64Array,
): void {
  const { y, k1, k6, k7, k8, k9, k10, k11, k12 } = slot;
  const { w, k2, k3, k4, k5 } = scratch;
  const n = y.length;
  for (let i = 0; i < n; i++) w[i] = y[i] + h * a2_1 * k1[i];
  f(t + c2 * h, w, k2);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (a3_1 * k1[i] + a3_2 * k2[i]);
  }
  f(t + c3 * h, w, k3);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (a4_1 * k1[i] + a4_3 * k3[i]);
  }
  f(t + c4 * h, w, k4);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (a5_1 * k1[i] + a5_3 * k3[i] + a5_4 * k4[i]);
  }
  f(t + c5 * h, w, k5);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (a6_1 * k1[i] + a6_4 * k4[i] + a6_5 * k5[i]);
  }
  f(t + c6 * h, w, k6);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (a7_1 * k1[i] + a7_4 * k4[i] + a7_5 * k5[i] + a7_6 * k6[i]);
  }
  f(t + c7 * h, w, k7);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (a8_1 * k1[i] + a8_4 * k4[i] + a8_5 * k5[i] + a8_6 * k6[i] + a8_7 * k7[i]);
  }
  f(t + c8 * h, w, k8);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] + h * (a9_1 * k1[i] + a9_4 * k4[i] + a9_5 * k5[i] + a9_6 * k6[i] + a9_7 * k7[i] + a9_8 * k8[i]);
  }
  f(t + c9 * h, w, k9);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (a10_1 * k1[i] +
          a10_4 * k4[i] +
          a10_5 * k5[i] +
          a10_6 * k6[i] +
          a10_7 * k7[i] +
          a10_8 * k8[i] +
          a10_9 * k9[i]);
  }
  f(t + c10 * h, w, k10);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (a11_1 * k1[i] +
          a11_4 * k4[i] +
          a11_5 * k5[i] +
          a11_6 * k6[i] +
          a11_7 * k7[i] +
          a11_8 * k8[i] +
          a11_9 * k9[i] +
          a11_10 * k10[i]);
  }
  f(t + c11 * h, w, k11);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (a12_1 * k1[i] +
          a12_4 * k4[i] +
          a12_5 * k5[i] +
          a12_6 * k6[i] +
          a12_7 * k7[i] +
          a12_8 * k8[i] +
          a12_9 * k9[i] +
          a12_10 * k10[i] +
          a12_11 * k11[i]);
  }
  f(t + h, w, k12);
  for (let i = 0; i < n; i++) {
    next[i] =
      y[i] +
      h *
        (b1 * k1[i] +
          b6 * k6[i] +
          b7 * k7[i] +
          b8 * k8[i] +
          b9 * k9[i] +
          b10 * k10[i] +
          b11 * k11[i] +
          b12 * k12[i]);
  }
}

/** Error of the step in units of the tolerance (at most 1 is accepted); NaN or Infinity where a stage was not finite.
 *  Source: Hairer, Norsett, Wanner I, section II.10: |h| e5^2 / sqrt(n (e5^2 + 0.01 e3^2)). */
export function errorOf(
  h: number,
  slot: Slot,
  scratch: Scratch,
  next: Float64Array,
  rtol: number,
  atol: number,
): number {
  const { y, k1, k6, k7, k8, k9, k10, k11, k12 } = slot;
  const { k2, k3, k4, k5 } = scratch;
  const n = y.length;
  let fifth = 0;
  let third = 0;
  let probe = 0;
  for (let i = 0; i < n; i++) {
    const scale = atol + rtol * Math.max(Math.abs(y[i]), Math.abs(next[i]));
    const e5 =
      (e1 * k1[i] +
        e6 * k6[i] +
        e7 * k7[i] +
        e8 * k8[i] +
        e9 * k9[i] +
        e10 * k10[i] +
        e11 * k11[i] +
        e12 * k12[i]) /
      scale;
    const e3 =
      (b1 * k1[i] +
        b6 * k6[i] +
        b7 * k7[i] +
        b8 * k8[i] +
        b9 * k9[i] +
        b10 * k10[i] +
        b11 * k11[i] +
        b12 * k12[i] -
        bhat1 * k1[i] -
        bhat9 * k9[i] -
        bhat12 * k12[i]) /
      scale;
    fifth += e5 * e5;
    third += e3 * e3;
    // Stages 2 to 5 have no weight in the estimates; 0 * Infinity and 0 * NaN are NaN.
    probe += 0 * (k2[i] + k3[i] + k4[i] + k5[i]);
  }
  const both = fifth + 0.01 * third;
  if (both === 0) return probe;
  return both < Infinity ? (Math.abs(h) * fifth) / Math.sqrt(n * both) + probe : Infinity;
}
