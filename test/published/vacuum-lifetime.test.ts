import { describe, expect, it } from 'vitest';
import { evaluate } from './standard-model.js';

/* Chigusa, Moroi and Shoji, arXiv:1803.03902: log10 of the decay rate per Gyr and Gpc^3 is -582 (+40 -45 from M_h,
 * +184 -329 from M_t, +144 -218 from alpha_s) at next-to-leading order, for M_h = 125.09 +- 0.24,
 * M_t = 173.1 +- 0.6 GeV, alpha_s = 0.1181 +- 0.0011 (inputs from memory). The engine has the tree-level bounce. */

const INPUTS = { Mt: 173.1, Mh: 125.09, alphaS: 0.1181, MW: 80.384, cutoff: 1.2209e19 };
const rate = (change: Readonly<Record<string, number>>): number =>
  evaluate({ ...INPUTS, ...change }).vacuumDecayRate;

describe('the decay rate of the electroweak vacuum', () => {
  it('is 10^-582 per Gyr and Gpc^3, within the smallest published uncertainty', () => {
    expect(rate({})).toBeGreaterThan(-582 - 40);
    expect(rate({})).toBeLessThan(-582 + 40);
  });

  it.each([
    [{ Mh: 125.09 + 0.24 }, -45],
    [{ Mh: 125.09 - 0.24 }, 40],
    [{ Mt: 173.1 - 0.6 }, -329],
    [{ Mt: 173.1 + 0.6 }, 184],
    [{ alphaS: 0.1181 + 0.0011 }, -218],
    [{ alphaS: 0.1181 - 0.0011 }, 144],
  ])('moves with %o by the published %s, to ten per cent', (change, published) => {
    const move = rate(change) - rate({});
    expect(Math.abs(move / published - 1)).toBeLessThan(0.1);
  });

  it('has its bounce below the Planck scale: raising the cut-off further changes nothing', () => {
    expect(rate({ cutoff: 1e18 })).toBeCloseTo(rate({ cutoff: 1e20 }), 6);
  });
});
