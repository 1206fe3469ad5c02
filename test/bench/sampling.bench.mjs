/** One hundred thousand points of four inputs in blocks of 1024, against as many numbers of the engine's generator.
 *  Target: 300,000 points/s; the evaluation of a point costs a thousand times more. */
import { readScan } from '../../dist/orchestrator/scan/read-scan.js';
import { samplerOf } from '../../dist/orchestrator/sampling/sampler.js';
import { best, report } from './timing.mjs';

const POINTS = 102_400;
const BLOCK = 1024;
const out = new Float64Array(4 * POINTS);

const reference = best(() => {
  for (let i = 0; i < out.length; i++) out[i] = Math.random();
});
for (const method of ['sobol', 'uniform', 'latin-hypercube']) {
  const scan = {
    model: 'sm',
    sample: { method, points: POINTS },
    vary: {
      Mt: { gaussian: [172.57, 0.29] },
      Mh: { range: [100, 150] },
      alphaS: { list: [0.117, 0.118] },
      cutoff: { range: [1e4, 1e19], scale: 'log' },
    },
  };
  const { plan } = readScan(new TextEncoder().encode(JSON.stringify(scan)), 'bench');
  const sampler = samplerOf(plan, 0);
  const time = best(() => {
    for (let first = 0; first < POINTS; first += BLOCK) sampler.fill(first, BLOCK);
  });
  report(`${method}, ${Math.round(POINTS / time)} points/ms`, time, reference, 'Math.random');
}
