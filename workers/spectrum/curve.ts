import { findRoot } from '../numerics/find-root.js';
import { SCALE_ACCURACY } from '../running/trajectory.js';
import type { Trajectory } from '../running/trajectory.js';

/** A function of the running couplings; `observe` writes both numbers. */
export interface Observed {
  value: number;
  /** A continuous function with the sign of d(value)/d(ln mu), usually that derivative itself. */
  slope: number;
  /** @param y  state at t = ln(mu/GeV)
   *  @param dy its derivative with respect to t */
  observe(t: number, y: Float64Array, dy: Float64Array): void;
}

/** One observed function along the trajectory of a point. Nothing is missed that the samples' values and slopes
 *  can show: a dip below zero between two samples of the same sign is found by where the slope turns. */
export class Curve {
  private values = new Float64Array(64);
  private slopes = new Float64Array(64);
  private trajectory!: Trajectory;
  private readonly value = (t: number): number => this.at(t);
  private readonly slope = (t: number): number => {
    this.at(t);
    return this.observed.slope;
  };

  constructor(private readonly observed: Observed) {}

  follow(trajectory: Trajectory): void {
    this.trajectory = trajectory;
    const { count, times, y, dy } = trajectory;
    if (count > this.values.length) {
      this.values = new Float64Array(2 * count);
      this.slopes = new Float64Array(2 * count);
    }
    for (let k = 0; k < count; k++) {
      trajectory.look(k);
      this.observed.observe(times[k], y, dy);
      this.values[k] = this.observed.value;
      this.slopes[k] = this.observed.slope;
    }
  }

  /** Value at t. */
  at(t: number): number {
    const { trajectory, observed } = this;
    trajectory.visit(t);
    observed.observe(t, trajectory.y, trajectory.dy);
    return observed.value;
  }

  /** Lowest t with a value at or below zero; NaN where there is none. */
  firstDescent(): number {
    const { values, slopes } = this;
    const { count, times } = this.trajectory;
    if (values[0] <= 0) return times[0];
    for (let k = 1; k < count; k++) {
      if (values[k] <= 0) return findRoot(this.value, times[k - 1], times[k], SCALE_ACCURACY);
      if (slopes[k - 1] < 0 && slopes[k] > 0) {
        const bottom = findRoot(this.slope, times[k - 1], times[k], SCALE_ACCURACY);
        if (this.at(bottom) <= 0) return findRoot(this.value, times[k - 1], bottom, SCALE_ACCURACY);
      }
    }
    return NaN;
  }

  /** The t of the lowest value between the start and `until`. */
  lowest(until = Infinity): number {
    const { values, slopes } = this;
    const { count, times } = this.trajectory;
    let best = times[0];
    let least = values[0];
    for (let k = 1; k < count && times[k - 1] < until; k++) {
      const inside = times[k] <= until;
      const end = inside ? times[k] : until;
      if (slopes[k - 1] < 0 && (inside ? slopes[k] : this.slope(end)) > 0) {
        const bottom = findRoot(this.slope, times[k - 1], end, SCALE_ACCURACY);
        const value = this.at(bottom);
        if (value < least) [least, best] = [value, bottom];
      }
      if (inside && values[k] < least) [least, best] = [values[k], times[k]];
    }
    return best;
  }
}
