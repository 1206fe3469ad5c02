import { describe, expect, it } from 'vitest';
import { derivatives } from '../../../workers/running/derivatives.js';
import { Trajectory } from '../../../workers/running/trajectory.js';
import { Lifetime, MetastabilityMargin } from '../../../workers/spectrum/decay.js';
import { Barrier, EffectiveQuartic } from '../../../workers/spectrum/effective-quartic.js';

const trajectory = new Trajectory(derivatives(3));
trajectory.run(
  Math.log(173.34),
  Math.log(1.2209e19),
  Float64Array.of(0.3583, 0.64779, 1.1666, 0.9369, 0.0156, 0.01, 0.12604, 1, 0),
  1e-12,
);

describe('slopes', () => {
  it.each([
    ['the effective quartic', new EffectiveQuartic(), (slope: number) => slope, [6, 15, 22, 23.5, 30, 43]],
    ['the margin', new MetastabilityMargin(), (slope: number) => slope, [6, 15, 25, 40]],
    ['the barrier', new Barrier(), Math.sign, [6, 15, 22, 24.1]],
    ['the lifetime', new Lifetime(), Math.sign, [24, 30, 38, 42]],
  ] as const)('of %s agree with differences along the running', (_, observed, read, places) => {
    for (const t of places) {
      const at = (x: number): { value: number; slope: number } => {
        trajectory.visit(x);
        observed.observe(x, trajectory.y, trajectory.dy);
        return { value: observed.value, slope: observed.slope };
      };
      const h = 1e-3;
      const { slope } = at(t);
      const difference = (at(t + h).value - at(t - h).value) / (2 * h);
      expect(read(slope)).toBeCloseTo(read(difference), 8);
    }
  });
});

describe('the one-loop potential', () => {
  it('cancels the scale dependence of the tree potential up to two loops: Coleman and Weinberg', () => {
    // V = e^(4 Gamma) [lambda + loop(ln mu = ln h)]: with one-loop running, d/d(ln mu) at fixed h vanishes at order
    // (coupling)^3, so a shift of mu = h e^s changes lambda + loop - s (sum of n x^2)/(8 pi^2) only beyond that.
    const weak = Float64Array.of(0.01, 0.02, 0.03, 0.025, 0, 0, 0.0002, 1, 0);
    const running = new Trajectory(derivatives(1));
    running.run(0, 1, weak, 1e-12);
    running.visit(1);
    const [gY, g2, , yt, , , lambda] = weak;
    const neutral = (g2 * g2 + gY * gY) / 4;
    const squares =
      -12 * (yt * yt * 0.5) ** 2 +
      6 * (g2 * g2 * 0.25) ** 2 +
      3 * neutral ** 2 +
      9 * lambda ** 2 +
      3 * lambda ** 2;
    const growth = Math.exp(4 * running.y[8]);
    const change = growth * running.y[6] - lambda;
    const predicted = squares / (8 * Math.PI ** 2);
    expect(Math.abs(change / predicted - 1)).toBeLessThan(1e-3);
  });

  it('is lambda itself where every coupling but lambda is tiny', () => {
    const quartic = new EffectiveQuartic();
    quartic.observe(0, Float64Array.of(0, 0, 0, 0, 0, 0, 1e-9, 1, 0), new Float64Array(9));
    expect(quartic.value / 1e-9).toBeCloseTo(1, 6);
    quartic.observe(0, new Float64Array(9), new Float64Array(9));
    expect([quartic.value, quartic.slope]).toEqual([0, 0]);
  });
});
