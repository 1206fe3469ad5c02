import { findRoot } from '../numerics/find-root.js';
import { STATE_SIZE } from './state.js';
import { SCALE_ACCURACY } from './trajectory.js';
import type { Trajectory } from './trajectory.js';

/** Largest size of component i of the state along the samples, turning points between samples included. */
export function largest(trajectory: Trajectory, i: number): number {
  const { count, times, states, slopes } = trajectory;
  let best = Math.abs(states[i]);
  for (let k = 1; k < count; k++) {
    const before = (k - 1) * STATE_SIZE + i;
    const after = k * STATE_SIZE + i;
    best = Math.max(best, Math.abs(states[after]));
    const grows = states[before] * slopes[before] > 0;
    const shrinks = states[after] * slopes[after] < 0;
    if (grows && shrinks && states[before] * states[after] > 0) {
      best = Math.max(best, turningPoint(trajectory, i, times[k - 1], times[k]));
    }
  }
  return best;
}

function turningPoint(trajectory: Trajectory, i: number, a: number, b: number): number {
  const slope = (t: number): number => {
    trajectory.visit(t);
    return trajectory.dy[i];
  };
  trajectory.visit(findRoot(slope, a, b, SCALE_ACCURACY));
  return Math.abs(trajectory.y[i]);
}
