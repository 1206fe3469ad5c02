import { describe, expect, test } from 'vitest';
import { uniform } from '../../../orchestrator/sampling/uniform.js';
import { placeOf, points } from './golden.js';

function draw(
  first: number,
  count: number,
  input = 'Mt',
  seed = '1',
  stratum = 0,
  generation = 0,
): Float64Array {
  const out = new Float64Array(count);
  uniform({ seed, stratum, generation, input })(first, count, out);
  return out;
}

describe('the uniform sampler', () => {
  test.each(points.uniform)('repeats the independent computation at $place', ({ place, indices, values }) => {
    const fill = uniform(placeOf(place));
    const found = indices.map((index) => {
      const out = new Float64Array(1);
      fill(index, 1, out);
      return out[0];
    });
    expect(found).toEqual(values);
  });

  test('fills 256 equal cells evenly: chi-squared of 2^16 points within five standard deviations', () => {
    const n = 65536;
    const cells = new Float64Array(256);
    for (const u of draw(0, n)) cells[Math.floor(u * 256)]++;
    const expected = n / 256;
    const chi2 = cells.reduce((sum, count) => sum + (count - expected) ** 2 / expected, 0);
    // chi-squared with k degrees of freedom has mean k and variance 2 k
    expect(Math.abs(chi2 - 255)).toBeLessThan(5 * Math.sqrt(2 * 255));
  });

  test.each([
    ['inputs', draw(0, 65536, 'Mt'), draw(0, 65536, 'Mh')],
    ['seeds', draw(0, 65536, 'Mt', '1'), draw(0, 65536, 'Mt', '2')],
    ['strata', draw(0, 65536, 'Mt', '1', 0), draw(0, 65536, 'Mt', '1', 1)],
    ['generations', draw(0, 65536, 'Mt', '1', 0, 0), draw(0, 65536, 'Mt', '1', 0, 1)],
    ['neighbouring points', draw(0, 65536), draw(1, 65536)],
  ])('draws independently for different %s', (_what, a, b) => {
    let sum = 0;
    for (let i = 0; i < a.length; i++) sum += 12 * (a[i] - 0.5) * (b[i] - 0.5);
    // the mean of n products of independent standardised numbers has standard deviation 1 / sqrt(n)
    expect(Math.abs(sum / a.length)).toBeLessThan(5 / Math.sqrt(a.length));
  });
});
