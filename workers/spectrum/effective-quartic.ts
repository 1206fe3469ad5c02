import { exp } from '../numerics/exp.js';
import { log } from '../numerics/log.js';
import { FIELD, G2, GY, LAMBDA, LOOP, YT } from '../running/state.js';
import type { Observed } from './curve.js';

/** The effective quartic of the Higgs potential for fields far above the weak scale, V(h) = lambda_eff(h) h^4/4:
 *  one loop in Landau gauge, improved by the renormalisation group at mu = h, with top, W, Z, Higgs and Goldstone
 *  bosons (masses in the background field; the real part where lambda < 0) and e^(4 Gamma).
 *  t is ln(h/GeV). The scale of a gauge-dependent potential depends on the gauge; whether it goes negative does not.
 *  Neglects: bottom and tau, the mass term m2 h^2/2, two loops.
 *  Source:   Casas, Espinosa and Quiros, hep-ph/9409458 and hep-ph/9603227; Degrassi et al., arXiv:1205.6497,
 *            equation for lambda_eff; one-loop potential of Coleman and Weinberg, Phys. Rev. D7 (1973) 1888 */
export class EffectiveQuartic implements Observed {
  value = 0;
  slope = 0;
  private loop = 0;
  private loopSlope = 0;

  observe(_t: number, y: Float64Array, dy: Float64Array): void {
    const [yt, g2, gY, lambda] = [y[YT], y[G2], y[GY], y[LAMBDA]];
    const fields = 2 * y[FIELD];
    const fieldSlope = 2 * dy[FIELD];
    const weak = (g2 * g2) / 4;
    const weakSlope = (g2 * dy[G2]) / 2;
    const neutral = weak + (gY * gY) / 4;
    const neutralSlope = weakSlope + (gY * dy[GY]) / 2;
    this.loop = 0;
    this.loopSlope = 0;
    this.add(-12, (yt * yt) / 2, yt * dy[YT], fields - 3 / 2, fieldSlope);
    this.add(6, weak, weakSlope, fields - 5 / 6, fieldSlope);
    this.add(3, neutral, neutralSlope, fields - 5 / 6, fieldSlope);
    this.add(1, 3 * lambda, 3 * dy[LAMBDA], fields - 3 / 2, fieldSlope);
    this.add(3, lambda, dy[LAMBDA], fields - 3 / 2, fieldSlope);
    const growth = exp(2 * fields);
    const sum = lambda + LOOP * this.loop;
    this.value = growth * sum;
    this.slope = growth * (2 * fieldSlope * sum + dy[LAMBDA] + LOOP * this.loopSlope);
  }

  /** n x^2 (ln|x| + rest) and its slope: n degrees of freedom with mass^2 = x h^2. */
  private add(n: number, x: number, xSlope: number, rest: number, restSlope: number): void {
    if (x === 0) return;
    const bracket = log(Math.abs(x)) + rest;
    this.loop += n * x * x * bracket;
    this.loopSlope += n * x * (xSlope * (2 * bracket + 1) + x * restSlope);
  }
}

/** -ln(4 V) of V = lambda_eff h^4/4: lowest at the top of the potential barrier; huge where V is not positive. */
export class Barrier implements Observed {
  value = 0;
  slope = 0;
  private readonly quartic = new EffectiveQuartic();

  observe(t: number, y: Float64Array, dy: Float64Array): void {
    this.quartic.observe(t, y, dy);
    const { value, slope } = this.quartic;
    this.value = value > 0 ? -(4 * t + log(value)) : Number.MAX_VALUE;
    this.slope = -(4 * value + slope);
  }
}
