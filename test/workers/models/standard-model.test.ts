import { describe, expect, it } from 'vitest';
import { codeFingerprint } from '../../../orchestrator/provenance/code.js';
import { goldenBetas } from '../../golden/betas/polynomials.js';
import { SETTINGS, sm } from '../sm-task.js';

const FACTOR = 16 * Math.PI ** 2;

describe('betas', () => {
  const values = { gY: 0.36, g2: 0.65, g3: 1.16, yt: 0.94, yb: 0.02, ytau: 0.01, lambda: 0.126, m2: -8650 };

  it('are the published polynomials with loop factors, g1 beside gY', () => {
    const golden = goldenBetas('sm');
    const betas = sm.betas(values);
    expect(Object.keys(betas)).toEqual(sm.couplings.map((coupling) => coupling.name));
    for (const name of Object.keys(values)) {
      const one = golden.get(`b1[${name}]`)!(values) / FACTOR;
      const two = golden.get(`b2[${name}]`)!(values) / FACTOR ** 2;
      expect(betas[name].one_loop / one).toBeCloseTo(1, 12);
      expect(betas[name].two_loop / two).toBeCloseTo(1, 12);
      expect(betas[name].total).toBe(betas[name].one_loop + betas[name].two_loop);
    }
    expect(betas.g1.total / betas.gY.total).toBeCloseTo(Math.sqrt(5 / 3), 14);
  });

  it('takes what is not named as zero, and g1 for gY', () => {
    expect(sm.betas({ g3: 1 }).g3.one_loop).toBeCloseTo(-7 / FACTOR, 15);
    expect(sm.betas({ g3: 1 }).yt.total).toBe(0);
    expect(sm.betas({ g1: 1 }).g1.one_loop * FACTOR).toBeCloseTo(41 / 10, 12);
    expect(() => sm.betas({ g1: 1, gY: 1 })).toThrow(/sqrt/);
    expect(() => sm.betas({ gX: 1 })).toThrow(/gX/);
  });
});

describe('inputs and quantities', () => {
  const quantities = sm.modules(SETTINGS, {}).flatMap((module) => module.gives);

  it('have one name each, a unit, a symbol and a meaning', () => {
    const specs = [...sm.inputs, ...quantities];
    expect(new Set(specs.map((spec) => spec.name)).size).toBe(specs.length);
    for (const spec of specs) {
      expect(spec.name).toMatch(/^[a-z][a-zA-Z0-9]*$|^M[a-zA-Z]+$|^GF$/);
      expect(['1', 'GeV', 'GeV^2', 'GeV^-2']).toContain(spec.unit);
      expect(spec.symbol.length * spec.meaning.length).toBeGreaterThan(0);
    }
  });

  it('default to values inside the domain, each with a source', () => {
    for (const { default: value, domain, source, uncertainty, nuisance } of sm.inputs) {
      expect(value).toBeGreaterThanOrEqual(domain[0]);
      expect(value).toBeLessThanOrEqual(domain[1]);
      expect(source.text).not.toBe('');
      if (nuisance) expect([value, uncertainty! > 0]).toEqual([0, true]);
    }
  });

  it('modules read only inputs and what earlier modules give', () => {
    const known = new Set(sm.inputs.map((input) => input.name));
    for (const module of sm.modules(SETTINGS, {})) {
      for (const need of module.needs) expect([need, known.has(need)]).toEqual([need, true]);
      for (const { name } of module.gives) known.add(name);
    }
  });

  it('running and vacuum carry the beta functions and the integrator in their fingerprints', () => {
    const [, running, vacuum] = sm.modules(SETTINGS, {});
    const files = ['running/sm-beta-functions.ts', 'running/sm-three-loops.ts', 'numerics/dop853.ts'];
    for (const module of [running, vacuum]) {
      for (const file of files) {
        const url = new URL(`../../../workers/${file}`, import.meta.url).href;
        expect(codeFingerprint(module.code, [url])).not.toBe(codeFingerprint(module.code));
      }
    }
  });

  /* Particle Data Group 2024, https://pdg.lbl.gov. */
  it.each([
    ['Mt', 172.57, 0.29],
    ['Mh', 125.2, 0.11],
    ['alphaS', 0.118, 0.0009],
    ['MW', 80.3692, 0.0133],
    ['MZ', 91.188, 0.002],
    ['mb', 4.183, 0.007],
    ['mtau', 1.77693, 0.00009],
    ['GF', 1.1663788e-5, 6e-12],
  ])('%s = %s +- %s', (name, value, sigma) => {
    const input = sm.inputs.find((spec) => spec.name === name)!;
    expect([input.default, input.uncertainty]).toEqual([value, sigma]);
  });

  it('the default cut-off is the Planck mass (hbar c^5/G)^(1/2), G = 6.67430e-11 (CODATA 2022)', () => {
    const planck = Math.sqrt((1.054571817e-34 * 299792458 ** 5) / 6.6743e-11) / 1.602176634e-10;
    expect(sm.inputs.find((spec) => spec.name === 'cutoff')!.default / planck).toBeCloseTo(1, 4);
  });

  it('the running starts at the top mass', () => {
    expect(sm.startScale(new Map([['Mt', 170]]))).toBe(170);
    expect(sm.startScale(new Map())).toBe(172.57);
  });
});
