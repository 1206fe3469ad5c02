import { describe, expect, it } from 'vitest';
import { constraints } from '../../../workers/constraints/catalogue.js';
import type { Options } from '../../../workers/contract.js';

/* Each constraint by hand on numbers whose answer is plain. */

function judge(name: string, values: Readonly<Record<string, number>>, change: Options = {}) {
  const constraint = constraints.get(name)!;
  const options = {
    ...Object.fromEntries(Object.entries(constraint.options).map(([key, spec]) => [key, spec.default])),
    ...change,
  };
  const columns = new Map(Object.entries(values).map(([key, value]) => [key, Float64Array.of(value)]));
  const into = {
    outcome: new Uint8Array(1),
    margin: new Float64Array(1),
    logLikelihood: new Float64Array(1),
  };
  constraint.judge(columns, options, into);
  const words = constraint.explain(new Map(Object.entries(values)), options);
  return { outcome: into.outcome[0], margin: into.margin[0], logLikelihood: into.logLikelihood[0], words };
}

describe('perturbativity', () => {
  const couplings = { largestGauge: 1.2, largestYukawa: 0.9, largestQuartic: 0.13, perturbativityScale: NaN };

  it('compares g^2, y^2 and |lambda| with 4 pi', () => {
    const { outcome, margin, logLikelihood, words } = judge('perturbativity', couplings);
    expect(outcome).toBe(0);
    expect(margin).toBeCloseTo(Math.log((4 * Math.PI) / 1.44), 14);
    expect(logLikelihood).toBeNaN();
    expect(words).toContain('gauge');
  });

  it('names the scale where it is lost', () => {
    const lost = { ...couplings, largestQuartic: 16 * Math.PI, perturbativityScale: 2.5e8 };
    const { outcome, margin, words } = judge('perturbativity', lost);
    expect(outcome).toBe(1);
    expect(margin).toBeCloseTo(-Math.log(4), 14);
    expect(words).toContain('2.500e+8 GeV');
  });

  it('takes another limit', () => {
    expect(judge('perturbativity', couplings, { limit: 1.43 }).outcome).toBe(1);
    expect(judge('perturbativity', couplings, { limit: 1.45 }).outcome).toBe(0);
    expect(judge('perturbativity', { ...couplings, largestYukawa: 1.3 }, { limit: 1.6 }).outcome).toBe(1);
  });
});

describe('vacuum-stability', () => {
  const vacuum = {
    vacuumClass: 1,
    lambdaEffMin: -0.012,
    metastabilityMargin: 0.033,
    vacuumDecayExponent: -540,
    instabilityScale: 3.5e10,
  };

  it('accepts a stable vacuum only, unless told otherwise', () => {
    const strict = judge('vacuum-stability', vacuum);
    expect([strict.outcome, strict.margin]).toEqual([1, -0.012]);
    const lenient = judge('vacuum-stability', vacuum, { accept: 'metastable' });
    expect([lenient.outcome, lenient.margin]).toEqual([0, 0.033]);
    expect(lenient.words).toMatch(/metastable.*3\.50e\+10 GeV.*10\^-540/);
  });

  it('excludes an unstable vacuum either way', () => {
    const unstable = { ...vacuum, vacuumClass: 2, lambdaEffMin: -0.09, metastabilityMargin: -0.04 };
    expect(judge('vacuum-stability', unstable).outcome).toBe(1);
    const lenient = judge('vacuum-stability', unstable, { accept: 'metastable' });
    expect([lenient.outcome, lenient.margin]).toEqual([1, -0.04]);
  });

  it('says nothing where perturbativity is lost before the fate is known', () => {
    const strong = { ...vacuum, vacuumClass: 3, lambdaEffMin: 0.2, metastabilityMargin: 0.3 };
    expect(judge('vacuum-stability', strong)).toMatchObject({ outcome: 2, margin: NaN });
    expect(judge('vacuum-stability', strong).words).toMatch(/^not perturbative/);
  });
});

describe('measured numbers (Particle Data Group 2024)', () => {
  it.each([
    ['measured-top-mass', { Mt: 172.57 + 0.29, topMassShift: 0 }, 1],
    ['measured-top-mass', { Mt: 172.07, topMassShift: 0.5 }, 0],
    ['measured-top-mass', { Mt: 172.57, topMassShift: -0.87 }, -3],
    ['measured-higgs-mass', { Mh: 125.2 - 0.22 }, -2],
    ['measured-alpha-s', { alphaS: 0.118 + 0.0027 }, 3],
  ])('%s at %o is %i standard deviations off', (name, values, x) => {
    const { outcome, margin, logLikelihood } = judge(name, values);
    expect(margin).toBeCloseTo(2 - Math.abs(x), 9);
    expect(logLikelihood).toBeCloseTo(-(x * x) / 2, 9);
    if (Math.abs(x) !== 2) expect(outcome).toBe(Math.abs(x) < 2 ? 0 : 1);
  });

  it('take another measurement and another acceptance', () => {
    expect(judge('measured-top-mass', { Mt: 173.34, topMassShift: 0 }).outcome).toBe(1);
    const older = { value: 173.34, sigma: 0.76 };
    const { margin, words } = judge('measured-top-mass', { Mt: 174.1, topMassShift: 0 }, older);
    expect(margin).toBeCloseTo(1, 9);
    expect(words).toBe('174.1000 against 173.34 +- 0.76 GeV: 1.00 standard deviations, 2 accepted');
    expect(
      judge('measured-top-mass', { Mt: 174.1, topMassShift: 0 }, { ...older, accept: 0.9 }).outcome,
    ).toBe(1);
  });
});
