import { describe, expect, test } from 'vitest';
import { directions, sobol, SOBOL_DIMENSIONS } from '../../../orchestrator/sampling/sobol.js';
import { DIRECTIONS } from '../../../orchestrator/sampling/sobol-directions.js';
import { placeOf, points } from './golden.js';

/** A point of the unscrambled sequence from the direction numbers, as SciPy orders it (Gray code). */
function plain(dimension: number, index: number): number {
  const v = directions(dimension);
  let word = 0;
  for (let j = 0; j < 32; j++) if (((index ^ (index >>> 1)) >>> j) & 1) word ^= v[j];
  return (word >>> 0) / 2 ** 32;
}

function scrambled(dimensions: number, first: number, count: number, seed = '7'): Float64Array[] {
  return Array.from({ length: dimensions }, (_, d) => {
    const out = new Float64Array(count);
    sobol(d, { seed, stratum: 0, generation: 0, input: `x${d}` })(first, count, out);
    return out;
  });
}

/** How many points lie in each elementary interval of shape 2^-k[0] x 2^-k[1] x ... */
function countsIn(shape: readonly number[], coordinates: readonly Float64Array[]): Map<string, number> {
  const counts = new Map<string, number>();
  for (let i = 0; i < coordinates[0].length; i++) {
    const cell = shape.map((k, d) => Math.floor(coordinates[d][i] * 2 ** k)).join(',');
    counts.set(cell, (counts.get(cell) ?? 0) + 1);
  }
  return counts;
}

/** All ways to write `total` as a sum of `parts` whole numbers. */
function shapes(total: number, parts: number): number[][] {
  if (parts === 1) return [[total]];
  return Array.from({ length: total + 1 }, (_, k) =>
    shapes(total - k, parts - 1).map((rest) => [k, ...rest]),
  ).flat();
}

describe('the unscrambled sequence', () => {
  const { first, from100000 } = points.sobolPlain;
  test.each(first.map((values, index) => ({ index, values })))(
    'point $index is SciPy 1.10.1 in 50 dimensions',
    (row) => {
      expect(row.values.map((_, d) => plain(d, row.index))).toEqual(row.values);
    },
  );

  test('points 100000 and 100001 are SciPy 1.10.1 too', () => {
    const found = [100000, 100001].map((index) => from100000[0].map((_, d) => plain(d, index)));
    expect(found).toEqual(from100000);
  });

  test('the first rows are those printed in Joe and Kuo 2008 (file new-joe-kuo-6, from memory)', () => {
    // d s a m_i: "2 1 0 1", "3 2 1 1 3", "4 3 1 1 3 1", "5 3 2 1 1 1", "6 4 1 1 1 3 3"; a leaves out both end bits
    const rows = DIRECTIONS.slice(1, 6).map(({ polynomial, m }) => {
      const s = 31 - Math.clz32(polynomial);
      return [s, (polynomial >> 1) & (2 ** (s - 1) - 1), ...m];
    });
    expect(rows).toEqual([
      [1, 0, 1],
      [2, 1, 1, 3],
      [3, 1, 1, 3, 1],
      [3, 2, 1, 1, 1],
      [4, 1, 1, 1, 3, 3],
    ]);
  });
});

describe('the scrambled sequence', () => {
  test.each(points.sobolScrambled)(
    'repeats the independent computation in dimension $dimension',
    (golden) => {
      const fill = sobol(golden.dimension, placeOf(golden.place));
      const found = points.indices.map((index) => {
        const out = new Float64Array(1);
        fill(index, 1, out);
        return out[0];
      });
      expect(found).toEqual(golden.values);
    },
  );

  test.each(Array.from({ length: SOBOL_DIMENSIONS }, (_, d) => d))(
    'dimension %i puts one of 1024 points into each of 1024 cells, in every aligned block',
    (d) => {
      const fill = sobol(d, { seed: 's', stratum: 2, generation: 0, input: 'Mt' });
      for (const block of [0, 1, 5]) {
        const out = new Float64Array(1024);
        fill(block * 1024, 1024, out);
        expect(new Set(out.map((u) => Math.floor(u * 1024))).size).toBe(1024);
      }
    },
  );

  // t = sum of (degree of the primitive polynomial - 1) over the dimensions: Sobol 1967; H. Niederreiter, Random
  // Number Generation and Quasi-Monte Carlo Methods (1992), chapter 4
  test.each([
    { dimensions: 2, t: 0, m: 10 },
    { dimensions: 3, t: 1, m: 10 },
    { dimensions: 4, t: 3, m: 10 },
    { dimensions: 5, t: 5, m: 11 },
  ])(
    '$dimensions dimensions keep the ($t, m, s)-net: every elementary interval has its share',
    ({ dimensions, t, m }) => {
      for (const seed of ['7', 'another']) {
        const coordinates = scrambled(dimensions, 3 * 2 ** m, 2 ** m, seed);
        for (const shape of shapes(m - t, dimensions)) {
          const counts = countsIn(shape, coordinates);
          expect(counts.size, shape.join()).toBe(2 ** (m - t));
          expect(new Set(counts.values())).toEqual(new Set([2 ** t]));
        }
      }
    },
  );

  test('a single point is uniform over seeds, to the last of 52 bits', () => {
    const n = 2000;
    const values = Array.from({ length: n }, (_, seed) => scrambled(1, 12345, 1, `seed ${seed}`)[0][0]);
    const mean = values.reduce((a, b) => a + b) / n;
    expect(Math.abs(mean - 0.5)).toBeLessThan(5 / Math.sqrt(12 * n));
    for (let bit = 0; bit < 52; bit++) {
      const ones = values.filter((u) => Math.floor(u * 2 ** (bit + 1)) % 2 === 1).length;
      expect(Math.abs(ones - n / 2), `bit ${bit}`).toBeLessThan(5 * Math.sqrt(n / 4));
    }
  });

  test('integrates a smooth product far better than independent points would', () => {
    const n = 2 ** 12;
    const coordinates = scrambled(5, 0, n);
    let sum = 0;
    for (let i = 0; i < n; i++) sum += coordinates.reduce((product, x) => product * (1 + (x[i] - 0.5)), 1);
    // closed form 1; independent points would be off by sqrt((13/12)^5 - 1) / sqrt(n) = 0.011
    expect(Math.abs(sum / n - 1)).toBeLessThan(0.001);
  });
});
