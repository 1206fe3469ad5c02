/** How integrations end and how steps are chosen; every failure is data. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createDop853 } from '../../../workers/numerics/dop853.js';
import type { Derivative, Dop853, Dop853Settings } from '../../../workers/numerics/dop853.js';
import { goldenProblems, goldenTrajectories } from './problems.js';

function settings(tolerance: number, more: Partial<Dop853Settings> = {}): Dop853Settings {
  return { rtol: tolerance, atol: tolerance, maxSteps: 10_000, ...more };
}

describe('how an integration ends', () => {
  const square: Derivative = (_t, y, d) => {
    d[0] = y[0] * y[0];
  };

  it("'done' with the end reached exactly", () => {
    const solver = createDop853(1, square);
    expect(solver.integrate(0, 0.1, [1], settings(1e-9))).toBe('done');
    expect(solver.times[0]).toBe(0);
    expect(solver.times[solver.steps]).toBe(0.1);
    expect(solver.reached).toBe(0.1);
  });

  it("'stopped' at the first step end where the blow-up test says so", () => {
    const solver = createDop853(1, square);
    const stop = (_t: number, y: Float64Array): boolean => y[0] > 1e3;
    expect(solver.integrate(0, 2, [1], settings(1e-9, { stop }))).toBe('stopped');
    // 1 / (1 - t) is 1000 at 0.999.
    expect(solver.reached).toBeGreaterThan(0.999);
    expect(solver.reached).toBeLessThan(1);
    expect(solver.component(0, solver.times[solver.steps - 1])).toBeLessThanOrEqual(1e3);
    expect(solver.component(0, 0.5)).toBeCloseTo(2, 8);
  });

  it("'max-steps' at the ceiling of attempts, rejected ones included", () => {
    const solver = createDop853(1, square);
    expect(solver.integrate(0, 2, [1], settings(1e-9, { maxSteps: 5 }))).toBe('max-steps');
    expect(solver.steps).toBeLessThanOrEqual(5);
    expect(solver.evaluations).toBeLessThanOrEqual(2 + 5 * 12);
    expect(solver.integrate(0, 1, [1], settings(1e-9, { maxSteps: 0 }))).toBe('max-steps');
    expect(solver.reached).toBe(0);
  });

  it("'step-too-small' at a pole", () => {
    const solver = createDop853(1, square);
    expect(solver.integrate(0, 2, [1], settings(1e-9))).toBe('step-too-small');
    expect(Math.abs(solver.reached - 1)).toBeLessThan(1e-8);
  });

  it.each([NaN, Infinity, -Infinity])("'not-finite' where the right-hand side turns into %d", (value) => {
    const solver = createDop853(1, (t, _y, d) => {
      d[0] = t < 1 ? 1 : value;
    });
    expect(solver.integrate(0, 2, [0], settings(1e-9))).toBe('not-finite');
    expect(solver.reached).toBeLessThan(1);
    expect(solver.reached).toBeGreaterThan(1 - 1e-12);
    expect(solver.component(0, 0.5)).toBeCloseTo(0.5, 12);
  });

  it.each([
    ['the initial state', [NaN], 1, 0, 1],
    ['the initial state', [Infinity], 1, 0, 1],
    ['the initial derivative', [1], NaN, 0, 1],
    ['the end', [1], 1, 0, Infinity],
    ['the start', [1], 1, NaN, 1],
  ])("'not-finite' at once if %s is not finite", (_, y0, slope, t0, t1) => {
    const solver = createDop853(1, (_t, _y, d) => {
      d[0] = slope;
    });
    expect(solver.integrate(t0, t1, y0, settings(1e-9))).toBe('not-finite');
    expect(solver.evaluations).toBe(1);
    expect(solver.steps).toBe(0);
  });

  it('always, whatever the right-hand side, as data', () => {
    const nasty = fc.func(fc.double());
    fc.assert(
      fc.property(nasty, fc.double(), fc.double(), fc.double(), (f, t0, t1, y0) => {
        const solver = createDop853(1, (t, y, d) => {
          d[0] = f(t, y[0]);
        });
        const status = solver.integrate(t0, t1, [y0], settings(1e-6, { maxSteps: 50 }));
        expect(solver.evaluations).toBeLessThanOrEqual(2 + 12 * 50);
        if (status === 'done') expect(solver.reached).toBe(t1);
      }),
    );
  });

  it('at once where there is nothing to do', () => {
    const solver = createDop853(1, square);
    expect(solver.integrate(3, 3, [1], settings(1e-9))).toBe('done');
    expect([...solver.times]).toEqual([3]);
    expect(solver.component(0, 3)).toBe(1);
  });

  it.each([
    [0, 1e-9, [1], 'expected rtol > 0, got 0'],
    [NaN, 1e-9, [1], 'expected rtol > 0, got NaN'],
    [1e-9, 0, [1], 'expected atol > 0, got 0'],
    [1e-9, 1e-9, [1, 2], 'expected 1 initial values, got 2'],
  ])('with an error for rtol %d, atol %d, y0 %j', (rtol, atol, y0, message) => {
    const solver = createDop853(1, square);
    expect(() => solver.integrate(0, 1, y0, { rtol, atol, maxSteps: 10 })).toThrow(message);
  });
});

describe('the choice of steps', () => {
  /** The integral of t^3 over [0, 1], one call of the right-hand side spoilt. */
  function spoilt(call: number): Dop853 {
    let calls = 0;
    const solver = createDop853(1, (t, _y, d) => {
      calls++;
      d[0] = calls === call ? Infinity : t * t * t;
    });
    expect(solver.integrate(0, 1, [1], settings(1e-9))).toBe('done');
    expect(solver.component(0, 1)).toBeCloseTo(1.25, 9);
    return solver;
  }

  // Calls 1 and 2 are the start and the first guess of a step, 3 to 13 stages 2 to 12, 14 the slope after the step.
  it.each([3, 4, 5, 6, 7, 8, 13, 14])(
    'with one more step if call %d, in the first step, is not finite',
    (call) => {
      const calm = spoilt(0);
      const more = spoilt(call);
      expect(more.evaluations - calm.evaluations).toBeGreaterThanOrEqual(11);
      expect(more.times[1]).toBeLessThan(calm.times[1]);
    },
  );

  it('without longer steps directly after one that failed', () => {
    const log: number[] = [];
    const solver = createDop853(1, (t, y, d) => {
      log.push(t);
      // Sudden changes of pace.
      d[0] = -y[0] * (1 + 100 / (1 + 1e4 * (t - 1) * (t - 1)) + 300 / (1 + 1e5 * (t - 2) * (t - 2)));
    });
    expect(solver.integrate(0, 3, [1], settings(1e-8))).toBe('done');
    const attempts = attemptsIn(log.slice(2));
    expect(attempts.some(({ accepted }) => !accepted)).toBe(true);
    for (let i = 0; i + 2 < attempts.length; i++) {
      if (attempts[i].accepted) continue;
      expect(attempts[i + 1].h).toBeLessThan(attempts[i].h);
      if (attempts[i + 1].accepted) expect(attempts[i + 2].h).toBeLessThan(attempts[i + 1].h * (1 + 1e-9));
    }
  });

  it('begins with a step that holds, neither too long nor needlessly short', () => {
    for (const [name, { t0, t1, y0 }] of Object.entries(goldenTrajectories())) {
      const solver = createDop853(y0.length, goldenProblems[name]);
      solver.integrate(t0, t1, y0, settings(1e-9, { maxSteps: 1 }));
      expect(solver.steps).toBe(1);
      const first = Math.abs(solver.reached - t0);
      solver.integrate(t0, t1, y0, settings(1e-9));
      expect(first).toBeGreaterThan((0.1 * Math.abs(t1 - t0)) / solver.steps);
    }
  });

  it('grows from nothing where nothing changes', () => {
    const solver = createDop853(1, (_t, _y, d) => {
      d[0] = 0;
    });
    expect(solver.integrate(0, 1, [1], settings(1e-9))).toBe('done');
    expect(solver.steps).toBeLessThan(10);
  });
});

/** Steps tried from t = 0, read off the times of calls: eleven stages, the last at the end of the step, and a call at
 *  the same time again where the step was accepted. */
function attemptsIn(log: readonly number[]): { h: number; accepted: boolean }[] {
  const attempts = [];
  let t = 0;
  for (let k = 0; k + 10 < log.length; k += 11) {
    const end = log[k + 10];
    const accepted = log[k + 11] === end;
    attempts.push({ h: end - t, accepted });
    if (accepted) [t, k] = [end, k + 1];
  }
  return attempts;
}
