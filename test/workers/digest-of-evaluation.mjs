/** Prints the SHA-256 of results over the whole domain of the inputs: the same on every Node, or a promise is broken.
 *  Run by node-versions.test.ts under several versions; needs `npm run build` first. */
import { createHash } from 'node:crypto';
import { constraints } from '../../dist/workers/constraints/catalogue.js';
import { createEvaluator } from '../../dist/workers/evaluate.js';
import { models } from '../../dist/workers/models/catalogue.js';
import { quantitiesOf } from '../../dist/workers/quantities.js';

const COUNT = 1000;
const sm = models.get('sm');
const running = { loops: 3, tolerance: 1e-9 };
const varied = sm.inputs.map((input) => input.name).sort();
const task = {
  model: { name: 'sm', options: {} },
  running,
  varied,
  fixed: {},
  define: [{ name: 'ratio', expression: 'exp(log(Mt) / 3) / Mh ^ 0.7' }],
  constraints: [...constraints.values()].map(({ name, options }) => ({
    name,
    options: Object.fromEntries(Object.entries(options).map(([key, spec]) => [key, spec.default])),
  })),
  deciding: 2,
  keep: ['ratio', ...quantitiesOf(sm, running, {}).map((quantity) => quantity.name)],
};
const values = new Float64Array(varied.length * COUNT);
varied.forEach((name, k) => {
  const [low, high] = sm.inputs.find((input) => input.name === name).domain;
  for (let i = 0; i < COUNT; i++)
    values[k * COUNT + i] = low + (high - low) * (((i + 1) * Math.sqrt(k + 2)) % 1);
});
const result = createEvaluator(task).evaluate({ count: COUNT, values });
const hash = createHash('sha256');
for (const column of [result.quantities, result.margins, result.logLikelihoods]) {
  // One NaN: its other bits are the processor's business.
  for (let i = 0; i < column.length; i++) if (Number.isNaN(column[i])) column[i] = NaN;
  hash.update(new Uint8Array(column.buffer));
}
for (const bytes of [result.outcomes, result.failures, result.verdicts]) hash.update(bytes);
console.log(hash.digest('hex'));
