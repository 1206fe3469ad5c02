import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createDop853 } from '../../../workers/numerics/dop853.js';
import type { Derivative, Dop853, Dop853Settings } from '../../../workers/numerics/dop853.js';
import { bulirschStoer, bulirschStoerAt } from './bulirsch-stoer.js';
import { closedForms, goldenProblems, goldenTrajectories } from './problems.js';
import type { Problem } from './problems.js';

const TOLERANCES = [1e-6, 1e-9, 1e-12];

function settings(tolerance: number, more: Partial<Dop853Settings> = {}): Dop853Settings {
  return { rtol: tolerance, atol: tolerance, maxSteps: 10_000, ...more };
}

function solved({ f, t0, t1, exact }: Problem, tolerance: number): Dop853 {
  const start = exact(t0);
  const solver = createDop853(start.length, f);
  expect(solver.integrate(t0, t1, start, settings(tolerance))).toBe('done');
  return solver;
}

function stateAt(solver: Dop853, n: number, t: number): Float64Array {
  const out = new Float64Array(n);
  solver.at(t, out);
  return out;
}

/** The largest error of a component, relative to its size where that is above one. */
function error(found: ArrayLike<number>, wanted: ArrayLike<number>): number {
  return Math.max(
    ...Array.from(wanted, (value, i) => Math.abs(found[i] - value) / Math.max(1, Math.abs(value))),
  );
}

const between = (a: number, b: number, parts: number): number[] =>
  Array.from({ length: parts + 1 }, (_, i) => a + ((b - a) * i) / parts);

describe.each(closedForms)('$name', (problem) => {
  const n = problem.exact(problem.t0).length;

  it.each(TOLERANCES)('ends within ten times the tolerance %d', (tolerance) => {
    const solver = solved(problem, tolerance);
    expect(solver.reached).toBe(problem.t1);
    expect(error(stateAt(solver, n, problem.t1), problem.exact(problem.t1))).toBeLessThan(10 * tolerance);
  });

  it.each(TOLERANCES)('is as near between step ends, tolerance %d', (tolerance) => {
    const solver = solved(problem, tolerance);
    for (const t of between(problem.t0, problem.t1, 333)) {
      expect(error(stateAt(solver, n, t), problem.exact(t))).toBeLessThan(10 * tolerance);
    }
  });
});

describe('order', () => {
  const [oscillator] = closedForms.filter(({ name }) => name === 'oscillator');

  /** Slope of log(error) against log(steps), between two loose and tight integrations. */
  function fittedOrder(errorOf: (solver: Dop853) => number): number {
    const runs = [1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-10].map((tolerance) => solved(oscillator, tolerance));
    const points = runs.map((solver) => [Math.log(solver.steps), Math.log(errorOf(solver))]);
    const mean = (k: number): number => points.reduce((sum, point) => sum + point[k], 0) / points.length;
    const [x, y] = [mean(0), mean(1)];
    const above = points.reduce((sum, [px, py]) => sum + (px - x) * (py - y), 0);
    return -above / points.reduce((sum, [px]) => sum + (px - x) * (px - x), 0);
  }

  it('of the solution is 8', () => {
    const order = fittedOrder((solver) => error(stateAt(solver, 2, 20), oscillator.exact(20)));
    expect(order).toBeGreaterThan(7.6);
    expect(order).toBeLessThan(8.6);
  });

  it('of dense output is 7 or more', () => {
    const order = fittedOrder((solver) =>
      Math.max(...between(0, 20, 500).map((t) => error(stateAt(solver, 2, t), oscillator.exact(t)))),
    );
    expect(order).toBeGreaterThan(7.3);
    expect(order).toBeLessThan(8.6);
  });
});

describe('golden trajectories of scipy', () => {
  it.each(Object.entries(goldenTrajectories()))('%s', (name, { t0, t1, y0, end, evaluations }) => {
    const solver = createDop853(y0.length, goldenProblems[name]);
    for (const [tolerance, ceiling] of Object.entries(evaluations)) {
      expect(solver.integrate(t0, t1, y0, settings(Number(tolerance)))).toBe('done');
      expect(solver.evaluations).toBeLessThanOrEqual(1.15 * ceiling);
    }
    // Both differ from the exact solution by what the problem amplifies; the independent integrator says how much.
    solver.integrate(t0, t1, y0, settings(1e-13));
    const found = stateAt(solver, y0.length, t1);
    expect(error(found, end)).toBeLessThan(2e-9);
    expect(error(found, bulirschStoer(goldenProblems[name], t0, t1, y0))).toBeLessThan(2e-9);
  });

  it('returns to its start on the closed orbit of the restricted three-body problem', () => {
    // Arenstorf orbit: Hairer, Norsett, Wanner I, equations II.0.1 and II.0.2 with the initial values given there.
    const mu = 0.012277471;
    const orbit: Derivative = (_t, y, d) => {
      const d1 = Math.pow((y[0] + mu) * (y[0] + mu) + y[1] * y[1], 1.5);
      const d2 = Math.pow((y[0] - 1 + mu) * (y[0] - 1 + mu) + y[1] * y[1], 1.5);
      d[0] = y[2];
      d[1] = y[3];
      d[2] = y[0] + 2 * y[3] - ((1 - mu) * (y[0] + mu)) / d1 - (mu * (y[0] - 1 + mu)) / d2;
      d[3] = y[1] - 2 * y[2] - ((1 - mu) * y[1]) / d1 - (mu * y[1]) / d2;
    };
    const start = [0.994, 0, 0, -2.00158510637908252240537862224];
    const solver = createDop853(4, orbit);
    expect(solver.integrate(0, 17.0652165601579625588917206249, start, settings(1e-13))).toBe('done');
    expect(Math.abs(solver.component(0, solver.reached) - start[0])).toBeLessThan(1e-7);
    expect(Math.abs(solver.component(1, solver.reached))).toBeLessThan(1e-6);
  });
});

describe('the independent integrator', () => {
  it.each(closedForms)('itself agrees with the closed form of $name', ({ f, t0, t1, exact }) => {
    const times = between(t0, t1, 7);
    const states = bulirschStoerAt(f, t0, times, exact(t0));
    times.forEach((t, i) => expect(error(states[i], exact(t))).toBeLessThan(1e-12));
  });

  it('agrees on random systems of running-coupling type, at the end and between', () => {
    const weight = fc.double({ min: -0.3, max: 0.3, noNaN: true });
    const start = fc.double({ min: 0.1, max: 1.2, noNaN: true });
    const matrix = fc.array(weight, { minLength: 9, maxLength: 9 });
    fc.assert(
      fc.property(matrix, fc.tuple(start, start, start), (w, y0) => {
        // dy_i/dt = y_i sum_j w_ij y_j^2: bounded over a short time.
        const f: Derivative = (_t, y, d) => {
          for (let i = 0; i < 3; i++) {
            const [a, b, c] = [
              w[3 * i] * y[0] * y[0],
              w[3 * i + 1] * y[1] * y[1],
              w[3 * i + 2] * y[2] * y[2],
            ];
            d[i] = y[i] * (a + b + c);
          }
        };
        const solver = createDop853(3, f);
        const status = solver.integrate(0, 0.35, y0, settings(1e-12));
        expect(status).toBe('done');
        const times = [0.1, 0.2, 0.35];
        bulirschStoerAt(f, 0, times, y0).forEach((state, i) =>
          expect(error(stateAt(solver, 3, times[i]), state)).toBeLessThan(2e-11),
        );
      }),
      { numRuns: 50 },
    );
  });
});

describe('the trajectory', () => {
  const [oscillator] = closedForms.filter(({ name }) => name === 'oscillator');

  it('passes exactly through the step ends and is continuous there', () => {
    const solver = solved(oscillator, 1e-6);
    for (const t of solver.times.slice(1, -1)) {
      const gap = Math.abs(solver.component(0, t * (1 - 1e-15)) - solver.component(0, t));
      expect(gap).toBeLessThan(1e-13);
    }
  });

  it('is not a number outside the interval reached', () => {
    const solver = solved(oscillator, 1e-6);
    expect(solver.component(0, -1e-9)).toBeNaN();
    expect(solver.component(1, 20.000001)).toBeNaN();
    expect(solver.component(1, NaN)).toBeNaN();
    expect([...stateAt(solver, 2, 21)]).toEqual([NaN, NaN]);
  });

  it('costs three evaluations for each step that is asked about, and only once', () => {
    const solver = solved(oscillator, 1e-9);
    const before = solver.evaluations;
    solver.component(0, 10.01);
    solver.component(1, 10.01);
    stateAt(solver, 2, 10.01);
    expect(solver.evaluations).toBe(before + 3);
    expect(before).toBeLessThanOrEqual(2 + 12 * (solver.steps + 5));
  });

  it('has the same bits whatever was integrated or asked before', () => {
    const fresh = solved(oscillator, 1e-9);
    const times = between(0, 20, 50);
    const wanted = times.map((t) => [...stateAt(fresh, 2, t)]);
    const used = createDop853(2, oscillator.f);
    used.integrate(0, 300, [5, -2], settings(1e-12));
    for (const t of between(0, 300, 99)) stateAt(used, 2, t);
    used.integrate(1, 0.5, [NaN, 1], settings(1e-12));
    used.integrate(0, 20, oscillator.exact(0), settings(1e-9));
    for (const i of [50, 3, 17, 17, 0, 49]) expect([...stateAt(used, 2, times[i])]).toEqual(wanted[i]);
    expect(times.map((t) => [...stateAt(used, 2, t)])).toEqual(wanted);
  });

  it('is not disturbed by a later change of the array of initial values', () => {
    const y0 = Float64Array.of(0, 1);
    const solver = createDop853(2, oscillator.f);
    solver.integrate(0, 1, y0, settings(1e-9));
    y0.fill(7);
    expect([...stateAt(solver, 2, 0)]).toEqual([0, 1]);
  });
});
