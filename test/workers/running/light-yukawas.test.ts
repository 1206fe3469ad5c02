import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { bottomYukawa, tauYukawa } from '../../../workers/running/light-yukawas.js';
import { runStrongCoupling } from '../../../workers/running/strong-coupling.js';

interface Golden {
  readonly alphaS: number;
  readonly mb: number;
  readonly Mt: number;
  readonly alphaAtBottom: number;
  readonly alphaAtTop: number;
  readonly yukawa: number;
}

/* test/golden/qcd/make.py: the four-loop equations integrated by scipy. */
const golden = JSON.parse(
  readFileSync(new URL('../../golden/qcd/golden.json', import.meta.url), 'utf8'),
) as readonly Golden[];
const MZ = 91.1876;
const V = 246.2196;

describe('QCD with five flavours', () => {
  it.each(golden.map((point) => [point.alphaS, point] as const))('at alpha_s(M_Z) = %s', (alphaS, point) => {
    // The expanded solution differs from the integrated one by the next order, (alpha_s(m_b)/pi)^4 or so.
    const next = (4 * point.alphaAtBottom ** 4) / Math.PI;
    const down = Math.PI * runStrongCoupling(alphaS / Math.PI, 2 * Math.log(point.mb / MZ));
    const up = Math.PI * runStrongCoupling(alphaS / Math.PI, 2 * Math.log(point.Mt / MZ));
    expect(Math.abs(down / point.alphaAtBottom - 1)).toBeLessThan(next);
    expect(Math.abs(up / point.alphaAtTop - 1)).toBeLessThan(2e-5);
    expect(Math.abs(bottomYukawa(point.mb, alphaS, point.Mt) / point.yukawa - 1)).toBeLessThan(next);
  });

  it('gives alpha_s(m_b) = 0.2245 and m_b(M_Z) = 2.86 GeV (common knowledge of the trade, from memory)', () => {
    expect(Math.PI * runStrongCoupling(0.118 / Math.PI, 2 * Math.log(4.183 / MZ))).toBeCloseTo(0.2246, 3);
    expect((bottomYukawa(4.183, 0.118, MZ) * V) / Math.SQRT2).toBeCloseTo(2.86, 1);
  });

  it('has no answer beyond the Landau pole', () => {
    expect(runStrongCoupling(0.4, -20)).toBeNaN();
    expect(bottomYukawa(0.05, 0.15, 173)).toBeNaN();
  });
});

describe('the tau Yukawa coupling', () => {
  it('gives m_tau(M_Z) = 1.7462 GeV (Xing, Zhang and Zhou, arXiv:1112.3112, from memory)', () => {
    expect((tauYukawa(1.77682, MZ) * V) / Math.SQRT2).toBeCloseTo(1.7462, 3);
  });
});
