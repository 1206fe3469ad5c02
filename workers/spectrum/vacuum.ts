import { column, outputs } from '../columns.js';
import type { Block, Module } from '../contract.js';
import { exp } from '../numerics/exp.js';
import { LAMBDA } from '../running/state.js';
import type { Observed } from './curve.js';
import { Curve } from './curve.js';
import type { Trajectories, Trajectory } from '../running/trajectory.js';
import { Lifetime, LOG_GYR_GPC3, logProbability, logRate, MetastabilityMargin } from './decay.js';
import { Barrier, EffectiveQuartic } from './effective-quartic.js';
import { METASTABLE, NOT_PERTURBATIVE, STABLE, UNSTABLE } from './vacuum-class.js';
import { vacuumQuantities } from './vacuum-quantities.js';

/** The quartic itself as an observed function. */
class Quartic implements Observed {
  value = 0;
  slope = 0;

  observe(_t: number, y: Float64Array, dy: Float64Array): void {
    this.value = y[LAMBDA];
    this.slope = dy[LAMBDA];
  }
}

interface Curves {
  readonly quartic: Curve;
  readonly effective: Curve;
  readonly barrier: Curve;
  readonly margin: Curve;
  readonly lifetime: Curve;
}

/** Reads the paths that `running` left in `trajectories`: where the quartic and the potential turn negative, and
 *  how long the electroweak vacuum lives. */
export function vacuum(trajectories: Trajectories): Module {
  const curves: Curves = {
    quartic: new Curve(new Quartic()),
    effective: new Curve(new EffectiveQuartic()),
    barrier: new Curve(new Barrier()),
    margin: new Curve(new MetastabilityMargin()),
    lifetime: new Curve(new Lifetime()),
  };
  return {
    name: 'vacuum',
    code: import.meta.url,
    // lambdaAtStart stands for the running: without it there is no trajectory.
    needs: ['lambdaAtStart', 'perturbativityScale'],
    gives: vacuumQuantities,
    evaluate: (block) => judgeBlock(block, trajectories, curves),
  };
}

function judgeBlock(block: Block, trajectories: Trajectories, curves: Curves): void {
  const lost = column(block, 'perturbativityScale');
  const out = outputs(block, vacuumQuantities);
  for (let i = 0; i < block.count; i++) {
    if (block.failure[i] !== 0) continue;
    const trajectory = trajectories.of(i);
    writeQuartic(trajectory, curves, i, out);
    writePotential(trajectory, curves, i, out);
    writeLifetime(trajectory, curves, i, out);
    out[10][i] = classify(out[3][i], out[7][i], lost[i]);
  }
}

function writeQuartic(trajectory: Trajectory, { quartic }: Curves, i: number, out: Float64Array[]): void {
  quartic.follow(trajectory);
  const bottom = quartic.lowest();
  out[0][i] = quartic.at(bottom);
  out[1][i] = exp(bottom);
  out[2][i] = exp(quartic.firstDescent());
}

function writePotential(trajectory: Trajectory, curves: Curves, i: number, out: Float64Array[]): void {
  const { effective, barrier } = curves;
  effective.follow(trajectory);
  out[3][i] = effective.at(effective.lowest());
  const instability = effective.firstDescent();
  out[4][i] = exp(instability);
  if (!(instability > trajectory.times[0])) return;
  barrier.follow(trajectory);
  const top = barrier.lowest(instability);
  out[5][i] = exp((-barrier.at(top) - 2 * Math.LN2) / 4);
  out[6][i] = exp(top);
}

function writeLifetime(trajectory: Trajectory, curves: Curves, i: number, out: Float64Array[]): void {
  const { margin, lifetime } = curves;
  margin.follow(trajectory);
  out[7][i] = margin.at(margin.lowest());
  if (out[3][i] >= 0 || !(out[0][i] < 0)) return;
  lifetime.follow(trajectory);
  const t = lifetime.lowest();
  trajectory.visit(t);
  const lambda = trajectory.y[LAMBDA];
  out[8][i] = logProbability(t, lambda) / Math.LN10;
  out[9][i] = (logRate(t, lambda) + LOG_GYR_GPC3) / Math.LN10;
}

/** Instability is final; anything better is known only where the couplings stay perturbative up to the cut-off. */
function classify(lowestQuartic: number, distance: number, perturbativityLost: number): number {
  if (lowestQuartic < 0 && distance <= 0) return UNSTABLE;
  if (!Number.isNaN(perturbativityLost)) return NOT_PERTURBATIVE;
  return lowestQuartic >= 0 ? STABLE : METASTABLE;
}
