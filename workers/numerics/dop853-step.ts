/** One attempted step of DOP853 and its error estimate: the loop everything else waits for. */
import * as T from './dop853-tableau.js';

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
  for (let i = 0; i < n; i++) w[i] = y[i] + h * T.a2_1 * k1[i];
  f(t + T.c2 * h, w, k2);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (T.a3_1 * k1[i] + T.a3_2 * k2[i]);
  }
  f(t + T.c3 * h, w, k3);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (T.a4_1 * k1[i] + T.a4_3 * k3[i]);
  }
  f(t + T.c4 * h, w, k4);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (T.a5_1 * k1[i] + T.a5_3 * k3[i] + T.a5_4 * k4[i]);
  }
  f(t + T.c5 * h, w, k5);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (T.a6_1 * k1[i] + T.a6_4 * k4[i] + T.a6_5 * k5[i]);
  }
  f(t + T.c6 * h, w, k6);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (T.a7_1 * k1[i] + T.a7_4 * k4[i] + T.a7_5 * k5[i] + T.a7_6 * k6[i]);
  }
  f(t + T.c7 * h, w, k7);
  for (let i = 0; i < n; i++) {
    w[i] = y[i] + h * (T.a8_1 * k1[i] + T.a8_4 * k4[i] + T.a8_5 * k5[i] + T.a8_6 * k6[i] + T.a8_7 * k7[i]);
  }
  f(t + T.c8 * h, w, k8);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a9_1 * k1[i] + T.a9_4 * k4[i] + T.a9_5 * k5[i] + T.a9_6 * k6[i] + T.a9_7 * k7[i] + T.a9_8 * k8[i]);
  }
  f(t + T.c9 * h, w, k9);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a10_1 * k1[i] +
          T.a10_4 * k4[i] +
          T.a10_5 * k5[i] +
          T.a10_6 * k6[i] +
          T.a10_7 * k7[i] +
          T.a10_8 * k8[i] +
          T.a10_9 * k9[i]);
  }
  f(t + T.c10 * h, w, k10);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a11_1 * k1[i] +
          T.a11_4 * k4[i] +
          T.a11_5 * k5[i] +
          T.a11_6 * k6[i] +
          T.a11_7 * k7[i] +
          T.a11_8 * k8[i] +
          T.a11_9 * k9[i] +
          T.a11_10 * k10[i]);
  }
  f(t + T.c11 * h, w, k11);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a12_1 * k1[i] +
          T.a12_4 * k4[i] +
          T.a12_5 * k5[i] +
          T.a12_6 * k6[i] +
          T.a12_7 * k7[i] +
          T.a12_8 * k8[i] +
          T.a12_9 * k9[i] +
          T.a12_10 * k10[i] +
          T.a12_11 * k11[i]);
  }
  f(t + h, w, k12);
  for (let i = 0; i < n; i++) {
    next[i] =
      y[i] +
      h *
        (T.b1 * k1[i] +
          T.b6 * k6[i] +
          T.b7 * k7[i] +
          T.b8 * k8[i] +
          T.b9 * k9[i] +
          T.b10 * k10[i] +
          T.b11 * k11[i] +
          T.b12 * k12[i]);
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
      (T.e1 * k1[i] +
        T.e6 * k6[i] +
        T.e7 * k7[i] +
        T.e8 * k8[i] +
        T.e9 * k9[i] +
        T.e10 * k10[i] +
        T.e11 * k11[i] +
        T.e12 * k12[i]) /
      scale;
    const e3 =
      (T.b1 * k1[i] +
        T.b6 * k6[i] +
        T.b7 * k7[i] +
        T.b8 * k8[i] +
        T.b9 * k9[i] +
        T.b10 * k10[i] +
        T.b11 * k11[i] +
        T.b12 * k12[i] -
        T.bhat1 * k1[i] -
        T.bhat9 * k9[i] -
        T.bhat12 * k12[i]) /
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
