/** Points of the Standard Model: the running against a plain Runge-Kutta method of order 4 with the same functions and
 *  the same error, and whole points (matching, running, vacuum, constraints) against the running alone. */
import { createEvaluator } from '../../dist/workers/evaluate.js';
import { models } from '../../dist/workers/models/catalogue.js';
import { quantitiesOf } from '../../dist/workers/quantities.js';
import { derivatives } from '../../dist/workers/running/derivatives.js';
import { STATE_SIZE } from '../../dist/workers/running/state.js';
import { Trajectory } from '../../dist/workers/running/trajectory.js';
import { best, report } from './timing.mjs';

const START = Float64Array.of(0.3583, 0.64779, 1.1666, 0.9369, 0.0156, 0.01, 0.12604, 1, 0);
const [T0, T1] = [Math.log(173.34), Math.log(1.2209e19)];
const POINTS = 100;

/** Classical Runge-Kutta, steps of equal length: what one would write first. */
function plain(f, steps) {
  const n = STATE_SIZE;
  const [y, w, k1, k2, k3, k4] = Array.from({ length: 6 }, () => new Float64Array(n));
  const h = (T1 - T0) / steps;
  y.set(START);
  for (let step = 0; step < steps; step++) {
    f(0, y, k1);
    for (let i = 0; i < n; i++) w[i] = y[i] + 0.5 * h * k1[i];
    f(0, w, k2);
    for (let i = 0; i < n; i++) w[i] = y[i] + 0.5 * h * k2[i];
    f(0, w, k3);
    for (let i = 0; i < n; i++) w[i] = y[i] + h * k3[i];
    f(0, w, k4);
    for (let i = 0; i < n; i++) y[i] += (h / 6) * (k1[i] + 2 * k2[i] + 2 * k3[i] + k4[i]);
  }
  return y;
}

function worst(y, exact) {
  return y.reduce(
    (most, value, i) => Math.max(most, Math.abs(value - exact[i]) / Math.max(Math.abs(exact[i]), 0.01)),
    0,
  );
}

for (const loops of [1, 2, 3]) {
  const f = derivatives(loops);
  const trajectory = new Trajectory(f);
  trajectory.run(T0, T1, START, 1e-12);
  trajectory.visit(T1);
  const exact = trajectory.y.slice();
  let steps = 100;
  while (worst(plain(f, steps), exact) > 1e-9) steps = Math.ceil(steps * 1.1);
  const reference = best(() => {
    for (let i = 0; i < POINTS; i++) plain(f, steps);
  });
  const name = `plain Runge-Kutta of order 4 (${steps} steps for 1e-9)`;
  for (const tolerance of [1e-6, 1e-9]) {
    trajectory.run(T0, T1, START, tolerance);
    trajectory.visit(T1);
    const error = worst(trajectory.y, exact).toExponential(1);
    const run = () => {
      for (let i = 0; i < POINTS; i++) trajectory.run(T0, T1, START, tolerance);
    };
    report(
      `${POINTS} points run and sampled at ${loops} loops, tolerance ${tolerance}, error ${error}`,
      best(run),
      reference,
      name,
    );
  }
}

const sm = models.get('sm');
const running = { loops: 3, tolerance: 1e-9 };
const varied = ['Mh', 'Mt'];
const fixed = Object.fromEntries(
  sm.inputs.filter((input) => !varied.includes(input.name)).map((input) => [input.name, input.default]),
);
const task = {
  model: { name: 'sm', options: {} },
  running,
  varied,
  fixed,
  define: [],
  constraints: [
    { name: 'perturbativity', options: { limit: 12.566 } },
    { name: 'vacuum-stability', options: { accept: 'stable' } },
  ],
  deciding: 2,
  keep: quantitiesOf(sm, running, {}).map((quantity) => quantity.name),
};
const COUNT = 1024;
const values = new Float64Array(2 * COUNT);
for (let i = 0; i < COUNT; i++) {
  values[i] = 120 + 10 * ((i * 0.618) % 1);
  values[COUNT + i] = 168 + 10 * ((i * 0.755) % 1);
}
const alone = new Trajectory(derivatives(3));
const reference = best(() => {
  for (let i = 0; i < COUNT; i++) alone.run(T0, T1, START, 1e-9);
}, 5);
for (const block of [1, 16, 64, 256]) {
  const evaluator = createEvaluator(task, block);
  const time = best(() => evaluator.evaluate({ count: COUNT, values }), 5);
  const rate = (COUNT / time).toFixed(1);
  report(
    `${COUNT} whole points in blocks of ${block} (${rate} thousand a second)`,
    time,
    reference,
    'running alone',
  );
}
