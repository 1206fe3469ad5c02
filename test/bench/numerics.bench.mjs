/** The integrator on a system like the running of five couplings, against its right-hand side alone; exp, log, pow
 *  against those of the platform. */
import { createDop853 } from '../../dist/workers/numerics/dop853.js';
import { exp } from '../../dist/workers/numerics/exp.js';
import { log } from '../../dist/workers/numerics/log.js';
import { pow } from '../../dist/workers/numerics/pow.js';
import { best, report } from './timing.mjs';

/** Cubic with a damping fifth order, as costly as two loops; the numbers only resemble physics. */
function slope(_t, y, d) {
  const [a, b, c, q, l] = [y[0], y[1], y[2], y[3], y[4]];
  const [a2, b2, c2, q2] = [a * a, b * b, c * c, q * q];
  const k = 0.0063;
  d[0] = a * a2 * k * (4.1 + k * (4 * a2 + 2.7 * b2 + 8.8 * c2 - 1.7 * q2));
  d[1] = b * b2 * k * (-3.2 + k * (0.9 * a2 + 5.8 * b2 + 12 * c2 - 1.5 * q2));
  d[2] = c * c2 * k * (-7 + k * (1.1 * a2 + 4.5 * b2 - 26 * c2 - 2 * q2));
  d[3] =
    q * k * (4.5 * q2 - 0.9 * a2 - 2.2 * b2 - 8 * c2 + k * (6 * l * l - 12 * q2 * (q2 + l) - 108 * c2 * c2));
  d[4] =
    k *
    (24 * l * l - 6 * q2 * q2 + l * (12 * q2 - 9 * b2 - 1.8 * a2) + 0.6 * b2 * b2 + k * 30 * q2 * q2 * q2);
}

const START = [0.46, 0.65, 1.17, 0.94, 0.126];
const END = 38.8;
const POINTS = 200;
const solver = createDop853(5, slope);
const state = new Float64Array(5);

function integrate(tolerance, scales) {
  for (let i = 0; i < POINTS; i++) {
    solver.integrate(0, END, START, { rtol: tolerance, atol: tolerance, maxSteps: 1000 });
    for (let j = 0; j < scales; j++) solver.at((END * (j + 0.5)) / scales, state);
  }
}

function slopesAlone(calls) {
  const y = Float64Array.from(START);
  for (let i = 0; i < POINTS * calls; i++) {
    y[0] += 1e-12;
    slope(0, y, state);
  }
}

for (const tolerance of [1e-7, 1e-9, 1e-11]) {
  integrate(tolerance, 0);
  const calls = solver.evaluations;
  const alone = best(() => slopesAlone(calls), 40);
  const name = 'its right-hand side alone';
  report(
    `${POINTS} integrations at ${tolerance}, ${calls} evaluations each`,
    best(() => integrate(tolerance, 0), 40),
    alone,
    name,
  );
  report(
    'the same with the state at 50 scales',
    best(() => integrate(tolerance, 50), 40),
    alone,
    name,
  );
}

const CALLS = 100_000;
const elementary = [
  ['exp', (x) => exp(x), (x) => Math.exp(x)],
  ['log', (x) => log(x), (x) => Math.log(x)],
  ['pow', (x) => pow(x, 1.7), (x) => Math.pow(x, 1.7)],
];
let sink = 0;
for (const [name, ours, platform] of elementary) {
  const loop = (f) => () => {
    for (let i = 1; i <= CALLS; i++) sink += f(i * 1e-3);
  };
  report(`${CALLS} calls of ${name}`, best(loop(ours)), best(loop(platform)), `Math.${name}`);
}
if (Number.isNaN(sink)) throw new Error('expected numbers');
