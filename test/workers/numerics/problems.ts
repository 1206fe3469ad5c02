/** Problems with a known solution, and those of test/golden/numerics/trajectories.py. */
import { readFileSync } from 'node:fs';
import type { Derivative } from '../../../workers/numerics/dop853.js';

export interface Problem {
  readonly name: string;
  readonly f: Derivative;
  readonly t0: number;
  readonly t1: number;
  readonly exact: (t: number) => number[];
}

/** Closed forms: from any textbook. */
export const closedForms: readonly Problem[] = [
  {
    name: 'decay',
    f: (_t, y, d) => {
      d[0] = -y[0];
    },
    t0: 0,
    t1: 10,
    exact: (t) => [Math.exp(-t)],
  },
  {
    name: 'oscillator',
    f: (_t, y, d) => {
      d[0] = y[1];
      d[1] = -y[0];
    },
    t0: 0,
    t1: 20,
    exact: (t) => [Math.sin(t), Math.cos(t)],
  },
  {
    name: 'logistic, backwards',
    f: (_t, y, d) => {
      d[0] = y[0] * (1 - y[0]);
    },
    // From where errors grow no more than 1.3 times on the way.
    t0: 1,
    t1: -8,
    exact: (t) => [1 / (1 + Math.exp(-t))],
  },
  {
    // A one-loop gauge coupling: dg/dt = b g^3, 1/g^2 linear in t.
    name: 'one-loop coupling',
    f: (_t, y, d) => {
      d[0] = -0.04 * y[0] * y[0] * y[0];
    },
    t0: 5,
    t1: 43,
    exact: (t) => [1 / Math.sqrt(1 / (1.16 * 1.16) + 0.08 * (t - 5))],
  },
  {
    name: 'quadrature',
    f: (t, _y, d) => {
      d[0] = Math.cos(t);
      d[1] = t * t * t;
    },
    t0: -1,
    t1: 2,
    exact: (t) => [Math.sin(t), (t * t * t * t) / 4],
  },
];

export const goldenProblems: Readonly<Record<string, Derivative>> = {
  'lotka-volterra': (_t, y, d) => {
    d[0] = 1.5 * y[0] - y[0] * y[1];
    d[1] = y[0] * y[1] - 3 * y[1];
  },
  'van-der-pol': (_t, y, d) => {
    d[0] = y[1];
    d[1] = (1 - y[0] * y[0]) * y[1] - y[0];
  },
  lorenz: (_t, y, d) => {
    d[0] = 10 * (y[1] - y[0]);
    d[1] = y[0] * (28 - y[2]) - y[1];
    d[2] = y[0] * y[1] - (8 / 3) * y[2];
  },
  kepler: (_t, y, d) => {
    const r = Math.sqrt(y[0] * y[0] + y[1] * y[1]);
    d[0] = y[2];
    d[1] = y[3];
    d[2] = -y[0] / (r * r * r);
    d[3] = -y[1] / (r * r * r);
  },
  'time-dependent': (t, y, d) => {
    d[0] = -2 * t * y[0] * y[0];
    d[1] = t * t - y[1];
  },
};

export interface GoldenTrajectory {
  readonly t0: number;
  readonly t1: number;
  readonly y0: number[];
  readonly end: number[];
  /** How many evaluations scipy needs, by tolerance. */
  readonly evaluations: Readonly<Record<string, number>>;
}

export function goldenTrajectories(): Record<string, GoldenTrajectory> {
  const url = new URL('../../golden/numerics/trajectories.json', import.meta.url);
  return JSON.parse(readFileSync(url, 'utf8')) as Record<string, GoldenTrajectory>;
}
