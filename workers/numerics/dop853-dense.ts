/** The polynomial of degree 7 inside a step, computed only for steps that are asked about.
 *  Source: Hairer, Norsett, Wanner I, section II.6; three more stages give order 7. */
import type { Derivative, Scratch, Slot } from './dop853-step.js';
import * as T from './dop853-tableau.js';

/** Component i at t + x h inside the step, 0 <= x <= 1, once `prepareDense` has run. */
export function denseComponent(slot: Slot, i: number, x: number): number {
  const { y, dense } = slot;
  const n = y.length;
  const z = 1 - x;
  const inner = dense[i + 4 * n] + z * (dense[i + 5 * n] + x * dense[i + 6 * n]);
  const outer = dense[i + n] + x * (dense[i + 2 * n] + z * (dense[i + 3 * n] + x * inner));
  return y[i] + x * (dense[i] + z * outer);
}

/** Fills slot.dense for the step of length h from t that led to `after`; three evaluations. */
export function prepareDense(
  f: Derivative,
  t: number,
  h: number,
  slot: Slot,
  after: Slot,
  scratch: Scratch,
): void {
  moreStages(f, t, h, slot, after.k1, scratch);
  hermitePart(h, slot, after);
  higherPart(h, slot, after.k1, scratch);
  slot.denseReady = true;
}

/** Stages 14 to 16 into the scratch stages 2 to 4; k13 is the derivative after the step. */
function moreStages(
  f: Derivative,
  t: number,
  h: number,
  slot: Slot,
  k13: Float64Array,
  scratch: Scratch,
): void {
  const { y, k1, k6, k7, k8, k9, k10, k11, k12 } = slot;
  const { w, k2: k14, k3: k15, k4: k16 } = scratch;
  const n = y.length;
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a14_1 * k1[i] +
          T.a14_7 * k7[i] +
          T.a14_8 * k8[i] +
          T.a14_9 * k9[i] +
          T.a14_10 * k10[i] +
          T.a14_11 * k11[i] +
          T.a14_12 * k12[i] +
          T.a14_13 * k13[i]);
  }
  f(t + T.c14 * h, w, k14);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a15_1 * k1[i] +
          T.a15_6 * k6[i] +
          T.a15_7 * k7[i] +
          T.a15_8 * k8[i] +
          T.a15_11 * k11[i] +
          T.a15_12 * k12[i] +
          T.a15_13 * k13[i] +
          T.a15_14 * k14[i]);
  }
  f(t + T.c15 * h, w, k15);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (T.a16_1 * k1[i] +
          T.a16_6 * k6[i] +
          T.a16_7 * k7[i] +
          T.a16_8 * k8[i] +
          T.a16_9 * k9[i] +
          T.a16_13 * k13[i] +
          T.a16_14 * k14[i] +
          T.a16_15 * k15[i]);
  }
  f(t + T.c16 * h, w, k16);
}

/** Terms 0 to 2: the cubic through both ends with both slopes. */
function hermitePart(h: number, slot: Slot, after: Slot): void {
  const { y, k1, dense } = slot;
  const n = y.length;
  for (let i = 0; i < n; i++) {
    const rise = after.y[i] - y[i];
    dense[i] = rise;
    dense[i + n] = h * k1[i] - rise;
    dense[i + 2 * n] = 2 * rise - h * (k1[i] + after.k1[i]);
  }
}

/** Terms 3 to 6, from all stages. */
function higherPart(h: number, slot: Slot, k13: Float64Array, scratch: Scratch): void {
  const { k1, k6, k7, k8, k9, k10, k11, k12, dense } = slot;
  const { k2: k14, k3: k15, k4: k16 } = scratch;
  const n = k1.length;
  for (let i = 0; i < n; i++) {
    dense[i + 3 * n] =
      h *
      (T.d4_1 * k1[i] +
        T.d4_6 * k6[i] +
        T.d4_7 * k7[i] +
        T.d4_8 * k8[i] +
        T.d4_9 * k9[i] +
        T.d4_10 * k10[i] +
        T.d4_11 * k11[i] +
        T.d4_12 * k12[i] +
        T.d4_13 * k13[i] +
        T.d4_14 * k14[i] +
        T.d4_15 * k15[i] +
        T.d4_16 * k16[i]);
    dense[i + 4 * n] =
      h *
      (T.d5_1 * k1[i] +
        T.d5_6 * k6[i] +
        T.d5_7 * k7[i] +
        T.d5_8 * k8[i] +
        T.d5_9 * k9[i] +
        T.d5_10 * k10[i] +
        T.d5_11 * k11[i] +
        T.d5_12 * k12[i] +
        T.d5_13 * k13[i] +
        T.d5_14 * k14[i] +
        T.d5_15 * k15[i] +
        T.d5_16 * k16[i]);
    dense[i + 5 * n] =
      h *
      (T.d6_1 * k1[i] +
        T.d6_6 * k6[i] +
        T.d6_7 * k7[i] +
        T.d6_8 * k8[i] +
        T.d6_9 * k9[i] +
        T.d6_10 * k10[i] +
        T.d6_11 * k11[i] +
        T.d6_12 * k12[i] +
        T.d6_13 * k13[i] +
        T.d6_14 * k14[i] +
        T.d6_15 * k15[i] +
        T.d6_16 * k16[i]);
    dense[i + 6 * n] =
      h *
      (T.d7_1 * k1[i] +
        T.d7_6 * k6[i] +
        T.d7_7 * k7[i] +
        T.d7_8 * k8[i] +
        T.d7_9 * k9[i] +
        T.d7_10 * k10[i] +
        T.d7_11 * k11[i] +
        T.d7_12 * k12[i] +
        T.d7_13 * k13[i] +
        T.d7_14 * k14[i] +
        T.d7_15 * k15[i] +
        T.d7_16 * k16[i]);
  }
}
