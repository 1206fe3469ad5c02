import { FIELD, G2, G3, GY, LAMBDA, LOOP, MASS, YB, YT, YTAU } from './state.js';

/* One- and two-loop MSbar beta functions of the Standard Model, d/d(ln mu), V = m2 |H|^2 + lambda |H|^4,
 * hypercharge coupling gY (not GUT normalised), third-generation Yukawa couplings.
 *
 * Sources: Machacek and Vaughn, Nucl. Phys. B222 (1983) 83, B236 (1984) 221, B249 (1985) 70; corrections of
 * Luo, Wang and Xiao, hep-ph/0211440. The Higgs field's anomalous dimension in Landau gauge: Ford, Jack and
 * Jones, hep-ph/0111190 (V = lambda' h^4/24 there, lambda' = 6 lambda), from memory; its gauge part is derived
 * again in the tests from the general formula of the first reference.
 *
 * The only file with beta functions typed by hand; letters: A = gY^2, B = g2^2, C = g3^2, T = yt^2, D = yb^2,
 * E = ytau^2, l = lambda. */

/** Writes the one-loop derivatives of the state y (see state.ts) into out. */
export function oneLoop(y: Float64Array, out: Float64Array): void {
  const A = y[GY] * y[GY];
  const B = y[G2] * y[G2];
  const C = y[G3] * y[G3];
  const T = y[YT] * y[YT];
  const D = y[YB] * y[YB];
  const E = y[YTAU] * y[YTAU];
  const l = y[LAMBDA];
  out[GY] = LOOP * (41 / 6) * A * y[GY];
  out[G2] = LOOP * (-19 / 6) * B * y[G2];
  out[G3] = LOOP * -7 * C * y[G3];
  out[YT] = LOOP * y[YT] * ((9 / 2) * T + (3 / 2) * D + E - (17 / 12) * A - (9 / 4) * B - 8 * C);
  out[YB] = LOOP * y[YB] * ((3 / 2) * T + (9 / 2) * D + E - (5 / 12) * A - (9 / 4) * B - 8 * C);
  out[YTAU] = LOOP * y[YTAU] * (3 * T + 3 * D + (5 / 2) * E - (15 / 4) * A - (9 / 4) * B);
  out[LAMBDA] =
    LOOP *
    (l * (24 * l + 12 * T + 12 * D + 4 * E - 3 * A - 9 * B) -
      6 * T * T -
      6 * D * D -
      2 * E * E +
      (3 / 8) * A * A +
      (3 / 4) * A * B +
      (9 / 8) * B * B);
  out[MASS] = LOOP * y[MASS] * (6 * T + 6 * D + 2 * E + 12 * l - (3 / 2) * A - (9 / 2) * B);
  out[FIELD] = LOOP * ((9 / 4) * B + (3 / 4) * A - 3 * T - 3 * D - E);
}

/** Adds the two-loop terms to out. */
export function addTwoLoops(y: Float64Array, out: Float64Array): void {
  addTwoLoopsOfGaugeAndYukawa(y, out);
  addTwoLoopsOfHiggs(y, out);
}

function addTwoLoopsOfGaugeAndYukawa(y: Float64Array, out: Float64Array): void {
  const A = y[GY] * y[GY];
  const B = y[G2] * y[G2];
  const C = y[G3] * y[G3];
  const T = y[YT] * y[YT];
  const D = y[YB] * y[YB];
  const E = y[YTAU] * y[YTAU];
  const l = y[LAMBDA];
  const k = LOOP * LOOP;
  out[GY] +=
    k * A * y[GY] * ((-17 / 6) * T - (5 / 6) * D - (5 / 2) * E + (199 / 18) * A + (9 / 2) * B + (44 / 3) * C);
  out[G2] += k * B * y[G2] * ((-3 / 2) * T - (3 / 2) * D - (1 / 2) * E + (3 / 2) * A + (35 / 6) * B + 12 * C);
  out[G3] += k * C * y[G3] * (-2 * T - 2 * D + (11 / 6) * A + (9 / 2) * B - 26 * C);
  const scalar = 6 * l * l;
  const tau = E * ((-9 / 4) * E + (25 / 8) * A + (15 / 8) * B);
  const gauge = B * ((-23 / 4) * B + 9 * C) - 108 * C * C;
  out[YT] +=
    k *
    y[YT] *
    (T * (-12 * T - (11 / 4) * D - (9 / 4) * E - 12 * l + (131 / 16) * A + (225 / 16) * B + 36 * C) +
      D * ((-1 / 4) * D + (5 / 4) * E + (7 / 48) * A + (99 / 16) * B + 4 * C) +
      A * ((1187 / 216) * A - (3 / 4) * B + (19 / 9) * C) +
      tau +
      gauge +
      scalar);
  out[YB] +=
    k *
    y[YB] *
    (T * ((-1 / 4) * T - (11 / 4) * D + (5 / 4) * E + (91 / 48) * A + (99 / 16) * B + 4 * C) +
      D * (-12 * D - (9 / 4) * E - 12 * l + (79 / 16) * A + (225 / 16) * B + 36 * C) +
      A * ((-127 / 216) * A - (9 / 4) * B + (31 / 9) * C) +
      tau +
      gauge +
      scalar);
  out[YTAU] +=
    k *
    y[YTAU] *
    (T * ((-27 / 4) * T + (3 / 2) * D - (27 / 4) * E + (85 / 24) * A + (45 / 8) * B + 20 * C) +
      D * ((-27 / 4) * D - (27 / 4) * E + (25 / 24) * A + (45 / 8) * B + 20 * C) +
      E * (-3 * E - 12 * l + (179 / 16) * A + (165 / 16) * B) +
      A * ((457 / 24) * A + (9 / 4) * B) -
      (23 / 4) * B * B +
      scalar);
}

function addTwoLoopsOfHiggs(y: Float64Array, out: Float64Array): void {
  const A = y[GY] * y[GY];
  const B = y[G2] * y[G2];
  const C = y[G3] * y[G3];
  const T = y[YT] * y[YT];
  const D = y[YB] * y[YB];
  const E = y[YTAU] * y[YTAU];
  const l = y[LAMBDA];
  const k = LOOP * LOOP;
  out[LAMBDA] +=
    k *
    (l *
      (l * (-312 * l - 144 * T - 144 * D - 48 * E + 36 * A + 108 * B) +
        T * (-3 * T - 42 * D + (85 / 6) * A + (45 / 2) * B + 80 * C) +
        D * (-3 * D + (25 / 6) * A + (45 / 2) * B + 80 * C) +
        E * (-E + (25 / 2) * A + (15 / 2) * B) +
        A * ((629 / 24) * A + (39 / 4) * B) -
        (73 / 8) * B * B) +
      T * T * (30 * T - 6 * D - (8 / 3) * A - 32 * C) +
      T * (-6 * D * D - (19 / 4) * A * A + (21 / 2) * A * B - (9 / 4) * B * B) +
      D * D * (30 * D + (4 / 3) * A - 32 * C) +
      D * ((5 / 4) * A * A + (9 / 2) * A * B - (9 / 4) * B * B) +
      E * E * (10 * E - 4 * A) +
      E * ((-25 / 4) * A * A + (11 / 2) * A * B - (3 / 4) * B * B) +
      A * A * ((-379 / 48) * A - (559 / 48) * B) +
      B * B * ((305 / 16) * B - (289 / 48) * A));
  out[MASS] +=
    k *
    y[MASS] *
    (T * ((-27 / 2) * T - 21 * D - 72 * l + (85 / 12) * A + (45 / 4) * B + 40 * C) +
      D * ((-27 / 2) * D - 72 * l + (25 / 12) * A + (45 / 4) * B + 40 * C) +
      E * ((-9 / 2) * E - 24 * l + (25 / 4) * A + (15 / 4) * B) +
      l * (-60 * l + 24 * A + 72 * B) +
      A * ((557 / 48) * A + (15 / 8) * B) -
      (145 / 16) * B * B);
  out[FIELD] -=
    k *
    (T * ((-27 / 4) * T + (3 / 2) * D + (85 / 24) * A + (45 / 8) * B + 20 * C) +
      D * ((-27 / 4) * D + (25 / 24) * A + (45 / 8) * B + 20 * C) +
      E * ((-9 / 4) * E + (25 / 8) * A + (15 / 8) * B) +
      6 * l * l +
      A * ((431 / 96) * A + (9 / 16) * B) -
      (271 / 32) * B * B);
}
