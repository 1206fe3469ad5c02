/** The polynomial of degree 7 inside a step, computed only for steps that are asked about.
 *  Source: Hairer, Norsett, Wanner I, section II.6; three more stages give order 7. */
import type { Derivative, Scratch, Slot } from './dop853-step.js';
import * as T from './dop853-tableau.js';

// Copied, because the optimiser turns constants of this module into literals, those of others not: a third faster.
const { c14, c15, c16 } = T;
const { a14_1, a14_7, a14_8, a14_9, a14_10, a14_11, a14_12, a14_13 } = T;
const { a15_1, a15_6, a15_7, a15_8, a15_11, a15_12, a15_13, a15_14 } = T;
const { a16_1, a16_6, a16_7, a16_8, a16_9, a16_13, a16_14, a16_15 } = T;
const { d4_1, d4_6, d4_7, d4_8, d4_9, d4_10, d4_11, d4_12, d4_13, d4_14, d4_15, d4_16 } = T;
const { d5_1, d5_6, d5_7, d5_8, d5_9, d5_10, d5_11, d5_12, d5_13, d5_14, d5_15, d5_16 } = T;
const { d6_1, d6_6, d6_7, d6_8, d6_9, d6_10, d6_11, d6_12, d6_13, d6_14, d6_15, d6_16 } = T;
const { d7_1, d7_6, d7_7, d7_8, d7_9, d7_10, d7_11, d7_12, d7_13, d7_14, d7_15, d7_16 } = T;

/** Component i at t + x h inside the step, 0 <= x <= 1, once `prepareDense` has run. */
export function denseComponent(slot: Slot, i: number, x: number): number {
  const { y, dense } = slot;
  const n = y.length;
  const z = 1 - x;
  const inner = dense[i + 4 * n] + z * (dense[i + 5 * n] + x * dense[i + 6 * n]);
  const outer = dense[i + n] + x * (dense[i + 2 * n] + z * (dense[i + 3 * n] + x * inner));
  return y[i] + x * (dense[i] + z * outer);
}

/** The same for all components at once. */
export function denseState(slot: Slot, x: number, out: Float64Array): void {
  for (let i = 0; i < slot.y.length; i++) out[i] = denseComponent(slot, i, x);
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
        (a14_1 * k1[i] +
          a14_7 * k7[i] +
          a14_8 * k8[i] +
          a14_9 * k9[i] +
          a14_10 * k10[i] +
          a14_11 * k11[i] +
          a14_12 * k12[i] +
          a14_13 * k13[i]);
  }
  f(t + c14 * h, w, k14);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (a15_1 * k1[i] +
          a15_6 * k6[i] +
          a15_7 * k7[i] +
          a15_8 * k8[i] +
          a15_11 * k11[i] +
          a15_12 * k12[i] +
          a15_13 * k13[i] +
          a15_14 * k14[i]);
  }
  f(t + c15 * h, w, k15);
  for (let i = 0; i < n; i++) {
    w[i] =
      y[i] +
      h *
        (a16_1 * k1[i] +
          a16_6 * k6[i] +
          a16_7 * k7[i] +
          a16_8 * k8[i] +
          a16_9 * k9[i] +
          a16_13 * k13[i] +
          a16_14 * k14[i] +
          a16_15 * k15[i]);
  }
  f(t + c16 * h, w, k16);
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
      (d4_1 * k1[i] +
        d4_6 * k6[i] +
        d4_7 * k7[i] +
        d4_8 * k8[i] +
        d4_9 * k9[i] +
        d4_10 * k10[i] +
        d4_11 * k11[i] +
        d4_12 * k12[i] +
        d4_13 * k13[i] +
        d4_14 * k14[i] +
        d4_15 * k15[i] +
        d4_16 * k16[i]);
    dense[i + 4 * n] =
      h *
      (d5_1 * k1[i] +
        d5_6 * k6[i] +
        d5_7 * k7[i] +
        d5_8 * k8[i] +
        d5_9 * k9[i] +
        d5_10 * k10[i] +
        d5_11 * k11[i] +
        d5_12 * k12[i] +
        d5_13 * k13[i] +
        d5_14 * k14[i] +
        d5_15 * k15[i] +
        d5_16 * k16[i]);
    dense[i + 5 * n] =
      h *
      (d6_1 * k1[i] +
        d6_6 * k6[i] +
        d6_7 * k7[i] +
        d6_8 * k8[i] +
        d6_9 * k9[i] +
        d6_10 * k10[i] +
        d6_11 * k11[i] +
        d6_12 * k12[i] +
        d6_13 * k13[i] +
        d6_14 * k14[i] +
        d6_15 * k15[i] +
        d6_16 * k16[i]);
    dense[i + 6 * n] =
      h *
      (d7_1 * k1[i] +
        d7_6 * k6[i] +
        d7_7 * k7[i] +
        d7_8 * k8[i] +
        d7_9 * k9[i] +
        d7_10 * k10[i] +
        d7_11 * k11[i] +
        d7_12 * k12[i] +
        d7_13 * k13[i] +
        d7_14 * k14[i] +
        d7_15 * k15[i] +
        d7_16 * k16[i]);
  }
}
