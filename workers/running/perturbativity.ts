import { G2, G3, GY, LAMBDA, YB, YT, YTAU } from './state.js';

/** The limit that the trade calls perturbativity: g^2, y^2 and |lambda| below 4 pi (common practice, no source). */
export const FOUR_PI = 4 * Math.PI;

/** Largest of g^2, y^2 and |lambda| in units of 4 pi: perturbation theory is lost where it passes 1. */
export function measure(y: Float64Array): number {
  const gauge = Math.max(y[GY] * y[GY], y[G2] * y[G2], y[G3] * y[G3]);
  const yukawa = Math.max(y[YT] * y[YT], y[YB] * y[YB], y[YTAU] * y[YTAU]);
  return Math.max(gauge, yukawa, Math.abs(y[LAMBDA])) / FOUR_PI;
}
