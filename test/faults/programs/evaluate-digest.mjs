// Prints the SHA-256 of everything that a fixed set of points evaluates to, every column of it, from the built
// workers. Needs nothing but Node. Made the golden digest: node test/faults/programs/evaluate-digest.mjs
import { createHash } from 'node:crypto';
import { constraints } from '../../../dist/workers/constraints/catalogue.js';
import { createEvaluator } from '../../../dist/workers/evaluate.js';
import { models } from '../../../dist/workers/models/catalogue.js';
import { quantitiesOf } from '../../../dist/workers/quantities.js';

const POINTS = 300;
const running = { loops: 3, tolerance: 1e-9 };
const model = models.get('sm');
const defaults = (options) =>
  Object.fromEntries(Object.entries(options).map(([key, spec]) => [key, spec.default]));
// Wide enough for stable, metastable and unstable vacua, lost perturbativity, matching outside its range and, by the
// definition of mtau, points outside the domain of an input.
const box = { Mt: [130, 260], Mh: [60, 400], alphaS: [0.1, 0.135], cutoff: [1e4, 1.2209e19] };
const varied = Object.keys(box).sort();
const fixed = model.inputs
  .filter(({ name }) => !(name in box) && name !== 'mtau')
  .map((input) => [input.name, input.default]);
const task = {
  model: { name: 'sm', options: defaults(model.options) },
  running,
  varied,
  fixed: Object.fromEntries(fixed),
  define: [
    { name: 'mtau', expression: '1.77693 + 0.5 * (Mt > 245)' },
    { name: 'ratio', expression: 'log(Mt / Mh) + exp(-alphaS) + cutoff ^ 0.1' },
  ],
  constraints: [...constraints.values()].map(({ name, options }) => ({ name, options: defaults(options) })),
  deciding: 2,
  keep: ['ratio', ...quantitiesOf(model, running, {}).map(({ name }) => name)],
};

// The minimal standard generator of Lehmer, Park and Miller (Comm. ACM 31 (1988) 1192): exact in float64.
let state = 20261201;
const uniform = () => (state = (state * 16807) % 2147483647) / 2147483647;
const values = new Float64Array(varied.length * POINTS);
for (let i = 0; i < POINTS; i++)
  varied.forEach((name, k) => {
    const [low, high] = box[name];
    values[k * POINTS + i] = low + (high - low) * uniform();
  });

const result = createEvaluator(task).evaluate({ count: POINTS, values });
const hash = createHash('sha256');
for (const column of [result.quantities, result.margins, result.logLikelihoods])
  for (const x of column) {
    const bytes = Buffer.alloc(8);
    // There is one absent value, whichever NaN the processor made.
    bytes.writeDoubleLE(Number.isNaN(x) ? NaN : x);
    hash.update(bytes);
  }
for (const column of [result.outcomes, result.failures, result.verdicts]) hash.update(column);
const tally = [0, 1, 2].map((verdict) => result.verdicts.filter((v) => v === verdict).length);
console.log(JSON.stringify({ digest: hash.digest('hex'), tally }));
