import { G2, G3, GY, LAMBDA, LOOP, YT } from './state.js';

/* Three-loop MSbar terms of the Standard Model's gauge, top Yukawa and quartic couplings, keeping only yt.
 *
 * Source: the appendix of Buttazzo et al., arXiv:1307.3536, which collects Mihaila, Salomon and Steinhauser
 * (arXiv:1201.5868), Chetyrkin and Zoller (arXiv:1205.2892, 1303.2890) and Bednyakov, Pikelner and Velizhanin
 * (arXiv:1210.6873, 1212.6829, 1303.4364). Written from memory and confirmed by the published couplings at the
 * Planck scale (test/published/) and, for lambda, yt and the leading terms in g3, by their closed forms
 * (sm-three-loops.test.ts). The coefficient of lambda^2 yt^4, which memory gave in two versions, is the closed form
 * 1719/2 + 756 zeta(3) of arXiv:1205.2892 (also from memory; the other, 1719.52, is 7e-7 of lambda away at the Planck
 * scale). yb, ytau, m2 and the field's anomalous dimension have no three-loop term here.
 *
 * The source gives derivatives of a = (5/3) gY^2, b = g2^2, c = g3^2, y = yt^2 and l = lambda with respect to
 * ln mu^2. For a squared coupling that is g * dg/d(ln mu); for l it is half of dl/d(ln mu). */

/** Adds the three-loop terms of d/d(ln mu) to out. */
export function addThreeLoops(state: Float64Array, out: Float64Array): void {
  addThreeLoopsOfGauge(state, out);
  addThreeLoopsOfTop(state, out);
  addThreeLoopsOfQuartic(state, out);
}

const CUBE = LOOP * LOOP * LOOP;

function addThreeLoopsOfGauge(state: Float64Array, out: Float64Array): void {
  const gY = state[GY];
  const g2 = state[G2];
  const g3 = state[G3];
  const a = (5 / 3) * gY * gY;
  const b = g2 * g2;
  const c = g3 * g3;
  const y = state[YT] * state[YT];
  const l = state[LAMBDA];
  out[GY] +=
    CUBE *
    (5 / 3) *
    (gY * gY * gY) *
    (y * ((189 / 16) * y - (29 / 5) * c - (471 / 32) * b - (2827 / 800) * a) +
      l * ((-9 / 5) * l + (9 / 10) * b + (27 / 50) * a) +
      c * ((297 / 5) * c - (3 / 5) * b - (137 / 75) * a) +
      b * ((789 / 64) * b + (123 / 160) * a) -
      (388613 / 24000) * a * a);
  out[G2] +=
    CUBE *
    (g2 * g2 * g2) *
    (y * ((147 / 16) * y - 7 * c - (729 / 32) * b - (593 / 160) * a) +
      l * (-3 * l + (3 / 2) * b + (3 / 10) * a) +
      c * (81 * c + 39 * b - (1 / 5) * a) +
      b * ((324953 / 1728) * b + (873 / 160) * a) -
      (5597 / 1600) * a * a);
  out[G3] +=
    CUBE *
    (g3 * g3 * g3) *
    (y * (15 * y - 40 * c - (93 / 8) * b - (101 / 40) * a) +
      c * ((65 / 2) * c + 21 * b + (77 / 15) * a) +
      b * ((109 / 8) * b - (3 / 40) * a) -
      (523 / 120) * a * a);
}

function addThreeLoopsOfTop(state: Float64Array, out: Float64Array): void {
  const a = (5 / 3) * state[GY] * state[GY];
  const b = state[G2] * state[G2];
  const c = state[G3] * state[G3];
  const y = state[YT] * state[YT];
  const l = state[LAMBDA];
  out[YT] +=
    CUBE *
    state[YT] *
    (y * y * (58.6028 * y + 198 * l - 157 * c - (1593 / 16) * b - (2437 / 80) * a) +
      l * y * ((15 / 4) * l + 16 * c + (135 / 2) * b + (127 / 10) * a) +
      y * (c * (363.764 * c + 48.37 * b + 18.074 * a) + b * (16.99 * b + 34.829 * a) - 24.422 * a * a) +
      l * l * (-36 * l + 45 * b + 9 * a) +
      l * (b * ((-171 / 16) * b + (117 / 40) * a) - (1089 / 400) * a * a) +
      c * c * (-619.35 * c + 73.654 * b - 15.096 * a) +
      c * (b * (-21.072 * b - (321 / 20) * a) - 22.319 * a * a) +
      b * b * (169.829 * b - 4.743 * a) +
      a * a * (16.099 * a - 4.442 * b));
}

function addThreeLoopsOfQuartic(state: Float64Array, out: Float64Array): void {
  const a = (5 / 3) * state[GY] * state[GY];
  const b = state[G2] * state[G2];
  const c = state[G3] * state[G3];
  const y = state[YT] * state[YT];
  const l = state[LAMBDA];
  const aa = a * a;
  const bb = b * b;
  out[LAMBDA] +=
    2 *
    CUBE *
    (l * l * l * (6011.35 * l + 873 * y - 387.452 * b - 77.49 * a) +
      l * l * y * (1768.26 * y + 160.77 * c - 359.539 * b - 63.869 * a) +
      l * l * (790.28 * bb + 185.532 * aa + 316.64 * b * a) +
      l * y * y * (-223.382 * y - 662.866 * c - 5.47 * b - 21.384 * a) +
      l *
        y *
        (c * (356.968 * c + 15.1443 * b + 17.4544 * a) - 319.664 * bb - 74.8599 * aa + 5.61466 * b * a) +
      l * bb * (-57.144 * c + 865.483 * b + 79.638 * a) +
      l * aa * (-8.381 * c + 61.753 * b + 28.168 * a) +
      y * y * y * (-243.149 * y + 250.494 * c + 74.138 * b + 33.93 * a) +
      y * y * (c * (-50.201 * c + 13.349 * b + 17.57 * a) + 15.884 * bb + 15.948 * aa - 70.356 * b * a) +
      y * c * (16.464 * bb + 1.016 * aa + 11.386 * b * a) +
      y * (bb * (62.5 * b + 13.041 * a) + aa * (10.627 * b + 11.117 * a)) +
      c * (bb * (7.536 * b + 1.507 * a) + aa * (0.663 * a + 1.105 * b)) -
      bb * (114.091 * bb + 37.889 * b * a) +
      6.5 * bb * aa -
      aa * (1.508 * aa + 1.543 * b * a));
}
