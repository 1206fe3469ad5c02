import { topMass } from '../constraints/data/measured.js';
import type { Block, Model, Options, QuantitySpec, RunningSettings } from '../contract.js';
import { log } from '../numerics/log.js';
import { G1_OVER_GY, matching } from '../running/matching.js';
import { running } from '../running/running.js';
import { addTwoLoops, oneLoop } from '../running/sm-beta-functions.js';
import { LAMBDA, MASS, STATE_SIZE } from '../running/state.js';
import { Trajectories } from '../running/trajectory.js';
import { vacuum } from '../spectrum/vacuum.js';
import { standardModelInputs } from './standard-model-inputs.js';

export const standardModel: Model = {
  name: 'sm',
  code: import.meta.url,
  title: 'Standard Model',
  content:
    'gauge group SU(3) x SU(2) x U(1); three generations of Q (3,2,1/6), u^c (3bar,1,-2/3), d^c (3bar,1,1/3), ' +
    'L (1,2,-1/2), e^c (1,1,1); Higgs doublet H (1,2,1/2); V = m2 |H|^2 + lambda |H|^4; Yukawa couplings of the ' +
    'third generation only',
  sources: [
    {
      text: 'Buttazzo et al., Investigating the near-criticality of the Higgs boson, 2013',
      ref: 'arXiv:1307.3536',
    },
    {
      text: 'Machacek and Vaughn, 1983-85, two-loop renormalisation group equations',
      ref: 'doi:10.1016/0550-3213(83)90610-7',
    },
    { text: 'Luo, Wang and Xiao, 2002, two-loop renormalisation group equations', ref: 'hep-ph/0211440' },
  ],
  inputs: standardModelInputs,
  options: {},
  couplings: [
    coupling('gY', 'g_{Y}', 'hypercharge coupling'),
    coupling('g1', 'g_{1}', 'hypercharge coupling times sqrt(5/3)'),
    coupling('g2', 'g_{2}', 'weak coupling'),
    coupling('g3', 'g_{3}', 'strong coupling'),
    coupling('yt', 'y_{t}', 'top Yukawa coupling'),
    coupling('yb', 'y_{b}', 'bottom Yukawa coupling'),
    coupling('ytau', 'y_{\\tau}', 'tau Yukawa coupling'),
    coupling('lambda', '\\lambda', 'Higgs quartic coupling'),
    { ...coupling('m2', 'm^{2}', 'Higgs mass parameter'), unit: 'GeV^2' },
  ],
  modules: (settings) => chain(settings).modules,
  startScale: (inputs) => inputs.get('Mt') ?? topMass.value,
  trace,
  betas,
};

/** The modules of one evaluation and the trajectories they share. */
function chain(settings: RunningSettings) {
  const trajectories = new Trajectories(settings.loops);
  const modules = [matching(), running(settings, trajectories), vacuum(trajectories)];
  return { modules, trajectories };
}

/** Runs the same modules as a scan on a block of one point, so that both give the same bits. */
function trace(
  settings: RunningSettings,
  _options: Options,
  inputs: ReadonlyMap<string, number>,
  scales: readonly number[],
): readonly Float64Array[] {
  const { modules, trajectories } = chain(settings);
  const columns = new Map<string, Float64Array>();
  for (const { name, default: value } of standardModelInputs) {
    columns.set(name, Float64Array.of(inputs.get(name) ?? value));
  }
  const block: Block = { count: 1, columns, failure: new Uint8Array(1) };
  const [first, second] = modules;
  first.evaluate(block);
  second.evaluate(block);
  const m2 = columns.get('m2AtStart')![0];
  const trajectory = trajectories.of(0);
  return scales.map((scale) => {
    if (block.failure[0] === 0) trajectory.visit(log(scale));
    else trajectory.y.fill(NaN);
    return reported(trajectory.y, m2 * trajectory.y[MASS]);
  });
}

/** The state in the order of `couplings`: g1 after gY, m2 last. */
function reported(y: Float64Array, m2: number): Float64Array {
  return Float64Array.of(y[0], G1_OVER_GY * y[0], ...y.subarray(1, LAMBDA + 1), m2);
}

function betas(
  values: Readonly<Record<string, number>>,
): Readonly<Record<string, { one_loop: number; two_loop: number; total: number }>> {
  const y = stateOf(values);
  const one = new Float64Array(STATE_SIZE);
  const two = new Float64Array(STATE_SIZE);
  oneLoop(y, one);
  addTwoLoops(y, two);
  const first = reported(one, one[MASS]);
  const second = reported(two, two[MASS]);
  return Object.fromEntries(
    standardModel.couplings.map(({ name }, i) => [
      name,
      { one_loop: first[i], two_loop: second[i], total: first[i] + second[i] },
    ]),
  );
}

/** @throws RangeError for a name that is no coupling, or gY and g1 that do not belong together */
function stateOf(values: Readonly<Record<string, number>>): Float64Array {
  const names = standardModel.couplings.map(({ name }) => name);
  const stranger = Object.keys(values).find((name) => !names.includes(name));
  if (stranger !== undefined) throw new RangeError(`expected one of ${names.join(' ')}, found ${stranger}`);
  const { gY, g1, g2 = 0, g3 = 0, yt = 0, yb = 0, ytau = 0, lambda = 0, m2 = 0 } = values;
  const hyper = gY ?? (g1 ?? 0) / G1_OVER_GY;
  if (g1 !== undefined && !(Math.abs(g1 - G1_OVER_GY * hyper) <= 1e-12 * Math.abs(g1))) {
    throw new RangeError(`expected gY or g1 = sqrt(5/3) gY, found gY = ${hyper} and g1 = ${g1}`);
  }
  return Float64Array.of(hyper, g2, g3, yt, yb, ytau, lambda, m2, 0);
}

function coupling(name: string, symbol: string, meaning: string): QuantitySpec {
  return { name, unit: '1', symbol, meaning: `${meaning}, MSbar` };
}
