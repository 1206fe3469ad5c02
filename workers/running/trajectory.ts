import { createDop853 } from '../numerics/dop853.js';
import type { Dop853, Dop853Status } from '../numerics/dop853.js';
import { exp } from '../numerics/exp.js';
import { log1p } from '../numerics/log.js';
import { derivatives } from './derivatives.js';
import type { Derivatives } from './derivatives.js';
import { measure } from './perturbativity.js';
import { STATE_SIZE } from './state.js';

/** Where perturbation theory is given up: the running stops once g^2, y^2 or |lambda| passes this many times 4 pi. */
export const CEILING = 4;
/** Step tolerance below the wanted global error: over the whole domain the error then stays below the wanted one, and
 *  below five times it where a coupling is about to blow up (test/workers/running). */
const LOCAL_TO_GLOBAL = 20;
/** Couplings near zero (lambda changes sign) need no better than this part of the tolerance, absolutely. */
const ABSOLUTE = 0.01;
const MAX_STEPS = 2000;
/** Accuracy in ln(mu) to which scales are located. */
export const SCALE_ACCURACY = 1e-12;
/** The integrator's variable is u = ln(1 + (t - t0)/STRETCH): couplings change fastest at the start, by asymptotic
 *  freedom like 1/(t + constant), and in u a step of even length serves everywhere. A third fewer evaluations. */
const STRETCH = 20;
/** Samples a step: fine enough to see a coupling turn between them. */
const SAMPLES = 2;

const blownUp = (_t: number, y: Float64Array): boolean => measure(y) > CEILING;

/** The running of one point: its path and samples of state and derivative along it. Buffers are reused. */
export class Trajectory {
  /** Samples from the start to the end, both included. */
  count = 0;
  times = new Float64Array(64);
  states = new Float64Array(64 * STATE_SIZE);
  slopes = new Float64Array(64 * STATE_SIZE);
  /** State and its derivative with respect to t = ln(mu/GeV) where `visit` or `look` was last. */
  readonly y = new Float64Array(STATE_SIZE);
  readonly dy = new Float64Array(STATE_SIZE);
  private readonly path: Dop853;
  private start = 0;
  private end = 0;

  constructor(private readonly f: Derivatives) {
    this.path = createDop853(STATE_SIZE, (u, y, out) => {
      f(u, y, out);
      const stretch = STRETCH * exp(u);
      for (let i = 0; i < STATE_SIZE; i++) out[i] *= stretch;
    });
  }

  /** Runs from t0 to t1, t = ln(mu/GeV), t1 > t0; 'stopped' where perturbation theory was given up before t1.
   *  @param tolerance wanted global relative error of the couplings */
  run(t0: number, t1: number, y0: Float64Array, tolerance: number): Dop853Status {
    const rtol = tolerance / LOCAL_TO_GLOBAL;
    const settings = { rtol, atol: ABSOLUTE * rtol, maxSteps: MAX_STEPS, stop: blownUp };
    const status = this.path.integrate(0, log1p((t1 - t0) / STRETCH), y0, settings);
    this.start = t0;
    this.end = status === 'done' ? t1 : this.toT(this.path.reached);
    this.sample();
    return status;
  }

  /** Puts the state and its derivative at t into y and dy; NaN outside the running. */
  visit(t: number): void {
    // Rounding may put u one bit beyond the last step.
    const u = Math.min(log1p((t - this.start) / STRETCH), this.path.reached);
    this.path.at(t <= this.end ? u : NaN, this.y);
    this.f(t, this.y, this.dy);
  }

  /** The same at sample k. */
  look(k: number): void {
    const offset = k * STATE_SIZE;
    for (let i = 0; i < STATE_SIZE; i++) {
      this.y[i] = this.states[offset + i];
      this.dy[i] = this.slopes[offset + i];
    }
  }

  /** Ends the samples at t, inside the path. */
  cut(t: number): void {
    let k = 0;
    while (k < this.count && this.times[k] < t) k++;
    this.count = k;
    this.add(t);
  }

  private toT(u: number): number {
    return this.start + STRETCH * (exp(u) - 1);
  }

  private sample(): void {
    const { times, steps } = this.path;
    this.count = 0;
    for (let step = 0; step < steps; step++) {
      const h = (times[step + 1] - times[step]) / SAMPLES;
      for (let part = 0; part < SAMPLES; part++) this.add(this.toT(times[step] + part * h));
    }
    this.add(this.end);
  }

  private add(t: number): void {
    const k = this.count++;
    if (k === this.times.length) this.grow();
    this.times[k] = t;
    this.visit(t);
    this.states.set(this.y, k * STATE_SIZE);
    this.slopes.set(this.dy, k * STATE_SIZE);
  }

  private grow(): void {
    this.times = doubled(this.times);
    this.states = doubled(this.states);
    this.slopes = doubled(this.slopes);
  }
}

function doubled(array: Float64Array): Float64Array<ArrayBuffer> {
  const longer = new Float64Array(2 * array.length);
  longer.set(array);
  return longer;
}

/** The trajectories of the block in hand: how modules of one evaluation share what the running found. */
export class Trajectories {
  private readonly pool: Trajectory[] = [];
  private readonly f: Derivatives;

  constructor(loops: 1 | 2 | 3) {
    this.f = derivatives(loops);
  }

  /** The trajectory of a point of the block: what `running` wrote last. */
  of(point: number): Trajectory {
    while (this.pool.length <= point) this.pool.push(new Trajectory(this.f));
    return this.pool[point];
  }
}
