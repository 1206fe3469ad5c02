import { describe, expect, it } from 'vitest';
import { derivatives } from '../../../workers/running/derivatives.js';
import { measure } from '../../../workers/running/perturbativity.js';
import { running } from '../../../workers/running/running.js';
import { interpolate } from '../../../workers/running/start-values.js';
import { FIELD, STATE_SIZE } from '../../../workers/running/state.js';
import { Trajectories, Trajectory } from '../../../workers/running/trajectory.js';
import { blockOf, goldenPoints } from '../../golden/standard-model/points.js';
import type { GoldenPoint } from '../../golden/standard-model/points.js';
import { bulirschStoer } from '../numerics/bulirsch-stoer.js';

const TOLERANCE = 1e-9;
const LOOP = 1 / (16 * Math.PI ** 2);

function run(points: readonly GoldenPoint[], tolerance = TOLERANCE) {
  const block = blockOf(points);
  const trajectories = new Trajectories(points[0].loops);
  running({ loops: points[0].loops, tolerance }, trajectories).evaluate(block);
  const value = (name: string, i = 0): number => block.columns.get(name)![i];
  return { block, trajectories, value };
}

/** Relative, but absolute below 0.01: lambda passes zero. */
function distance(found: number, expected: number): number {
  return Math.abs(found - expected) / Math.max(Math.abs(expected), 0.01);
}

const reached = goldenPoints.filter((point) => point.expected.couplingsAtCutoff !== null);
const blownUp = goldenPoints.filter((point) => point.expected.couplingsAtCutoff === null);
const COLUMNS = { gY: 'gY', g2: 'g2', g3: 'g3', yt: 'yt', yb: 'yb', ytau: 'ytau', lam: 'lambda' };

describe('running against scipy (test/golden/standard-model)', () => {
  it.each(reached.map((point) => [point.name, point] as const))(
    '%s: couplings at the cut-off',
    (_, point) => {
      const { value, trajectories } = run([point]);
      const expected = point.expected.couplingsAtCutoff!;
      for (const [golden, name] of Object.entries(COLUMNS)) {
        expect(distance(value(`${name}AtCutoff`), expected[golden])).toBeLessThan(TOLERANCE);
      }
      expect(distance(value('g1AtCutoff'), Math.sqrt(5 / 3) * expected.gY)).toBeLessThan(TOLERANCE);
      expect(distance(value('m2AtCutoff'), -8650 * expected.massRatio)).toBeLessThan(TOLERANCE);
      const trajectory = trajectories.of(0);
      trajectory.visit(Math.log(point.cutoff));
      expect(distance(trajectory.y[FIELD], expected.fieldLog)).toBeLessThan(TOLERANCE);
      const slope = point.expected.lambdaSlopeAtCutoff!;
      expect(Math.abs(value('lambdaSlopeAtCutoff') - slope)).toBeLessThan(TOLERANCE);
      expect(value('perturbativityScale')).toBeNaN();
    },
  );

  it.each(blownUp.map((point) => [point.name, point] as const))(
    '%s: where perturbativity is lost',
    (_, point) => {
      const { block, value } = run([point]);
      expect(block.failure[0]).toBe(0);
      expect(value('lambdaAtCutoff')).toBeNaN();
      expect(value('lambdaSlopeAtCutoff')).toBeNaN();
      const ratio = value('perturbativityScale') / point.expected.perturbativityScale!;
      expect(Math.abs(ratio - 1)).toBeLessThan(1e-8);
      const largest = Math.max(
        value('largestQuartic'),
        value('largestGauge') ** 2,
        value('largestYukawa') ** 2,
      );
      expect(largest / (16 * Math.PI)).toBeCloseTo(1, 9);
    },
  );
});

describe('the global error', () => {
  const centre = reached[0];

  it('stays below the wanted tolerance against a thousand times tighter run and Bulirsch-Stoer', () => {
    const start = Float64Array.from([...Object.values(centre.start), 1, 0]);
    const f = derivatives(3);
    const [t0, t1] = [Math.log(centre.Mt), Math.log(centre.cutoff)];
    const oracle = bulirschStoer(f, t0, t1, start);
    for (const tolerance of [1e-4, 1e-6, 1e-8, 1e-10]) {
      for (const tighter of [tolerance / 1000, 0]) {
        const loose = new Trajectory(f);
        loose.run(t0, t1, start, tolerance);
        loose.visit(t1);
        let reference = oracle;
        if (tighter > 0) {
          const tight = new Trajectory(f);
          tight.run(t0, t1, start, tighter);
          tight.visit(t1);
          reference = tight.y;
        }
        for (let i = 0; i < STATE_SIZE; i++) {
          expect(distance(loose.y[i], reference[i])).toBeLessThan(tolerance);
        }
      }
    }
  });

  it('stays below the tolerance inside steps too', () => {
    const start = Float64Array.from([...Object.values(centre.start), 1, 0]);
    const f = derivatives(3);
    const t0 = Math.log(centre.Mt);
    const trajectory = new Trajectory(f);
    trajectory.run(t0, Math.log(centre.cutoff), start, TOLERANCE);
    let y = Float64Array.from(start);
    for (let k = 1; k <= 60; k++) {
      y = bulirschStoer(f, t0 + 0.64 * (k - 1), t0 + 0.64 * k, y);
      trajectory.visit(t0 + 0.64 * k);
      for (let i = 0; i < STATE_SIZE; i++) expect(distance(trajectory.y[i], y[i])).toBeLessThan(TOLERANCE);
    }
  });
});

describe('the global error over the domain of the inputs', () => {
  const f = derivatives(3);
  const [found, exact] = [new Trajectory(f), new Trajectory(f)];
  const at = { lambda: 0, yt: 0, g2: 0, gY: 0, g3: 0, m2: 0, valid: false };
  const golden = (i: number, k: number): number => ((i + 1) * Math.sqrt(k)) % 1;

  it.each([1e-7, 1e-9])('stays below the tolerance %s, or five times it close to a blow-up', (tolerance) => {
    let [calm, wild] = [0, 0];
    for (let i = 0; i < 200; i++) {
      const Mt = 50 + 250 * golden(i, 2);
      interpolate(Mt, 1 + 399 * golden(i, 3), 0.08 + 0.07 * golden(i, 5), 80.38, at);
      const start = Float64Array.of(at.gY, at.g2, at.g3, at.yt, 0.0156, 0.01, at.lambda, 1, 0);
      const end = Math.log(1e4) + 34.7 * golden(i, 7);
      const status = found.run(Math.log(Mt), end, start, tolerance);
      expect(exact.run(Math.log(Mt), end, start, 1e-12)).toBe(status);
      if (status !== 'done') continue;
      found.visit(end);
      exact.visit(end);
      const error = Math.max(...found.y.map((value, k) => distance(value, exact.y[k])));
      let strongest = 0;
      for (let k = 0; k < exact.count; k++) {
        exact.look(k);
        strongest = Math.max(strongest, measure(exact.y));
      }
      if (strongest < 0.5) calm = Math.max(calm, error);
      else wild = Math.max(wild, error);
    }
    expect(calm).toBeGreaterThan(0);
    expect(calm).toBeLessThan(tolerance);
    expect(wild).toBeLessThan(5 * tolerance);
  });
});

describe('limits with closed forms', () => {
  const alone = { gY: 0, g2: 0, g3: 0, yt: 0, yb: 0, ytau: 0, lam: 0 };
  const point = (start: Partial<GoldenPoint['start']>, loops: 1 | 2, cutoff = 1e16): GoldenPoint => ({
    ...{ name: '', Mt: 173.34, cutoff, loops, expected: { couplingsAtCutoff: null } },
    start: { ...alone, ...start },
  });
  const L = Math.log(1e16 / 173.34);

  it('runs each gauge coupling as 1/g^2 = 1/g0^2 - 2 b t/(16 pi^2) at one loop', () => {
    const { value } = run([point({ gY: 0.36, g2: 0.65, g3: 1.17 }, 1)]);
    const exact = (g: number, b: number): number => 1 / Math.sqrt(1 / (g * g) - 2 * b * LOOP * L);
    expect(distance(value('gYAtCutoff'), exact(0.36, 41 / 6))).toBeLessThan(TOLERANCE);
    expect(distance(value('g2AtCutoff'), exact(0.65, -19 / 6))).toBeLessThan(TOLERANCE);
    expect(distance(value('g3AtCutoff'), exact(1.17, -7))).toBeLessThan(TOLERANCE);
  });

  it('runs QCD at two loops as its implicit solution', () => {
    // x = g3^2/(16 pi^2): dx/dt = -14 x^2 - 52 x^3, so 1/x + (26/7) ln(x/(1 + 26 x/7)) - 14 t is constant.
    const { value } = run([point({ g3: 1.17 }, 2)]);
    const invariant = (g: number, t: number): number => {
      const x = LOOP * g * g;
      return 1 / x + (26 / 7) * Math.log(x / (1 + (26 / 7) * x)) - 14 * t;
    };
    expect(invariant(value('g3AtCutoff'), L) / invariant(1.17, 0)).toBeCloseTo(1, 9);
  });

  it('runs the top Yukawa coupling with QCD at one loop as the ratio of powers of g3', () => {
    // With w = g3^2/yt^2: dw/d(ln g3) = (9 - 2 w)/7, so 9 - 2 w goes like g3^(-2/7).
    const { value } = run([point({ g3: 1.17, yt: 0.9 }, 1)]);
    const g = value('g3AtCutoff');
    const [w0, w] = [(1.17 / 0.9) ** 2, (g / value('ytAtCutoff')) ** 2];
    expect((9 - 2 * w) / (9 - 2 * w0) / (g / 1.17) ** (-2 / 7)).toBeCloseTo(1, 9);
  });

  it('finds the pole of a lone quartic: lambda = lambda0/(1 - 24 lambda0 t/(16 pi^2)) at one loop', () => {
    const { block, value } = run([point({ lam: 0.8 }, 1)]);
    const t = (1 / 0.8 - 1 / (4 * Math.PI)) / (24 * LOOP);
    expect(block.failure[0]).toBe(0);
    expect(value('perturbativityScale') / (173.34 * Math.exp(t))).toBeCloseTo(1, 8);
    expect(value('largestQuartic') / (16 * Math.PI)).toBeCloseTo(1, 9);
    const { value: small } = run([point({ lam: 0.05 }, 1)]);
    expect(distance(small('lambdaAtCutoff'), 0.05 / (1 - 24 * 0.05 * LOOP * L))).toBeLessThan(TOLERANCE);
  });

  it('leaves a free theory where it is', () => {
    const { value } = run([point({}, 2)]);
    expect(value('lambdaAtCutoff')).toBe(0);
    expect(value('m2AtCutoff')).toBe(-8650);
  });
});

describe('largest couplings', () => {
  it('include a turning point between the samples', () => {
    const unstable = goldenPoints.find((point) => point.name === 'light Higgs: early instability')!;
    const { value } = run([unstable]);
    expect(value('largestQuartic')).toBeCloseTo(-unstable.expected.lambdaMin!, 10);
  });
});

describe('a point that cannot be run', () => {
  it('fails as a result where a coupling is no number', () => {
    const { block } = run([{ ...reached[0], start: { ...reached[0].start, lam: NaN } }]);
    expect(block.failure[0]).toBe(3);
  });
});

describe('points beside each other', () => {
  it('have the same bits alone, together and in any order', () => {
    const same = goldenPoints.filter((point) => point.loops === 3);
    const together = run(same);
    const backwards = run([...same].reverse());
    same.forEach((point, i) => {
      const alone = run([point]);
      for (const name of [
        'lambdaAtCutoff',
        'ytAtCutoff',
        'largestQuartic',
        'perturbativityScale',
        'm2AtCutoff',
      ]) {
        expect(together.value(name, i)).toBe(alone.value(name));
        expect(backwards.value(name, same.length - 1 - i)).toBe(alone.value(name));
      }
    });
  });
});
