import { column, outputs } from '../columns.js';
import type { Block, Module, QuantitySpec, RunningSettings } from '../contract.js';
import { exp } from '../numerics/exp.js';
import { findRoot } from '../numerics/find-root.js';
import { log } from '../numerics/log.js';
import { largest } from './largest.js';
import { G1_OVER_GY } from './matching.js';
import { measure } from './perturbativity.js';
import { FIELD, G2, G3, GY, LAMBDA, MASS, STATE_SIZE, YB, YT, YTAU } from './state.js';
import type { Trajectories, Trajectory } from './trajectory.js';
import { CEILING, SCALE_ACCURACY } from './trajectory.js';

const STARTS = ['gY', 'g2', 'g3', 'yt', 'yb', 'ytau', 'lambda'].map((name) => `${name}AtStart`);
const NEEDS = ['Mt', 'cutoff', 'm2AtStart', ...STARTS];
const UNREACHED = 'a coupling blew up below the cut-off';

const GIVES: readonly QuantitySpec[] = [
  atCutoff('gY', 'g_{Y}', 'hypercharge coupling'),
  atCutoff('g1', 'g_{1}', 'hypercharge coupling times sqrt(5/3)'),
  atCutoff('g2', 'g_{2}', 'weak coupling'),
  atCutoff('g3', 'g_{3}', 'strong coupling'),
  atCutoff('yt', 'y_{t}', 'top Yukawa coupling'),
  atCutoff('yb', 'y_{b}', 'bottom Yukawa coupling'),
  atCutoff('ytau', 'y_{\\tau}', 'tau Yukawa coupling'),
  atCutoff('lambda', '\\lambda', 'Higgs quartic coupling'),
  { ...atCutoff('m2', 'm^{2}', 'Higgs mass parameter'), unit: 'GeV^2' },
  atCutoff('lambdaSlope', 'd\\lambda/d\\ln\\mu', 'slope of the quartic against ln mu'),
  highest('largestGauge', 'g', 'largest gauge coupling (gY, g2, g3)'),
  highest('largestYukawa', 'y', 'largest Yukawa coupling (yt, yb, ytau)'),
  highest('largestQuartic', '\\lambda', 'largest size of the quartic'),
  {
    name: 'perturbativityScale',
    unit: 'GeV',
    symbol: '\\Lambda_{4\\pi}',
    meaning: 'lowest scale at which g^2, y^2 or |lambda| passes 4 pi',
    absent: 'perturbative up to the cut-off',
    logarithmic: true,
  },
];

/** Runs the couplings of each point from M_t to the cut-off and leaves the path in `trajectories`. */
export function running(settings: RunningSettings, trajectories: Trajectories): Module {
  const evaluate = (block: Block): void => runBlock(block, settings.tolerance, trajectories);
  return { name: 'running', code: import.meta.url, needs: NEEDS, gives: GIVES, evaluate };
}

function runBlock(block: Block, tolerance: number, trajectories: Trajectories): void {
  const Mt = column(block, 'Mt');
  const cutoff = column(block, 'cutoff');
  const m2 = column(block, 'm2AtStart');
  const starts = STARTS.map((name) => column(block, name));
  const out = outputs(block, GIVES);
  const y0 = new Float64Array(STATE_SIZE);
  for (let i = 0; i < block.count; i++) {
    if (block.failure[i] !== 0) continue;
    starts.forEach((start, k) => (y0[k] = start[i]));
    y0[MASS] = 1;
    y0[FIELD] = 0;
    const trajectory = trajectories.of(i);
    const end = log(cutoff[i]);
    const status = trajectory.run(log(Mt[i]), end, y0, tolerance);
    if (status === 'done') writeCutoff(trajectory, end, m2[i], i, out);
    else if (status !== 'stopped') {
      block.failure[i] = status === 'max-steps' ? 2 : 3;
      continue;
    } else trajectory.cut(crossing(trajectory, CEILING));
    writeHighest(trajectory, i, out);
    writePerturbativity(trajectory, i, out);
  }
}

function writeCutoff(trajectory: Trajectory, end: number, m2: number, i: number, out: Float64Array[]): void {
  trajectory.visit(end);
  const { y, dy } = trajectory;
  const values = [y[GY], G1_OVER_GY * y[GY], y[G2], y[G3], y[YT], y[YB], y[YTAU], y[LAMBDA], m2 * y[MASS]];
  values.forEach((value, k) => (out[k][i] = value));
  out[9][i] = dy[LAMBDA];
}

function writeHighest(trajectory: Trajectory, i: number, out: Float64Array[]): void {
  out[10][i] = Math.max(largest(trajectory, GY), largest(trajectory, G2), largest(trajectory, G3));
  out[11][i] = Math.max(largest(trajectory, YT), largest(trajectory, YB), largest(trajectory, YTAU));
  out[12][i] = largest(trajectory, LAMBDA);
}

/** Ends the samples where perturbation theory is lost: nothing beyond is asked about. */
function writePerturbativity(trajectory: Trajectory, i: number, out: Float64Array[]): void {
  const lost = crossing(trajectory, 1);
  if (!(lost > 0)) return;
  out[13][i] = exp(lost);
  trajectory.cut(lost);
}

/** First t at which the measure of perturbativity passes `level`; NaN where it does not. */
function crossing(trajectory: Trajectory, level: number): number {
  for (let k = 0; k < trajectory.count; k++) {
    trajectory.look(k);
    if (measure(trajectory.y) <= level) continue;
    if (k === 0) return trajectory.times[0];
    const excess = (t: number): number => {
      trajectory.visit(t);
      return measure(trajectory.y) - level;
    };
    return findRoot(excess, trajectory.times[k - 1], trajectory.times[k], SCALE_ACCURACY);
  }
  return NaN;
}

function atCutoff(name: string, symbol: string, meaning: string): QuantitySpec {
  return {
    name: `${name}AtCutoff`,
    unit: '1',
    symbol: `${symbol}(\\Lambda)`,
    meaning: `${meaning} at the cut-off, MSbar`,
    absent: UNREACHED,
  };
}

function highest(name: string, symbol: string, meaning: string): QuantitySpec {
  return {
    name,
    unit: '1',
    symbol: `${symbol}_{\\mathrm{max}}`,
    meaning: `${meaning} up to the cut-off, or up to where the running stops because one has blown up`,
  };
}
