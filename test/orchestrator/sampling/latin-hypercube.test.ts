import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { latinHypercube, placeInCell } from '../../../orchestrator/sampling/latin-hypercube.js';
import { permutation } from '../../../orchestrator/sampling/permutation.js';
import { placeOf, points } from './golden.js';

const word = fc.integer({ min: 0, max: 0xffffffff });

describe('the permutation', () => {
  test('hits every number once, whatever the size and key', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 5000 }), word, word, (size, k0, k1) => {
        const at = permutation(size, [k0, k1]);
        const hit = new Set(Array.from({ length: size }, (_, i) => at(i)));
        return hit.size === size && Math.min(...hit) === 0 && Math.max(...hit) === size - 1;
      }),
      { numRuns: 100 },
    );
  });

  test('stays inside for sizes up to the largest scan', () => {
    const at = permutation(99_999_989, [1, 2]);
    for (let i = 0; i < 10_000; i++) expect(at(i * 9973)).toBeLessThan(99_999_989);
  });

  test.each([2, 3, 5, 6, 100])('sends a place of %i to every place equally often over keys', (size) => {
    const n = 20_000;
    const counts = new Float64Array(size);
    for (let k = 0; k < n; k++) counts[permutation(size, [k * 2654435761, k])(1)]++;
    const chi2 = counts.reduce((sum, count) => sum + (count - n / size) ** 2 / (n / size), 0);
    expect(Math.abs(chi2 - (size - 1))).toBeLessThan(5 * Math.sqrt(2 * (size - 1)));
  });
});

describe('the latin hypercube', () => {
  test.each(points.latin)(
    'repeats the independent computation of $size points at $place',
    ({ place, size, values }) => {
      const out = new Float64Array(values.length);
      latinHypercube(size, placeOf(place))(0, values.length, out);
      expect([...out]).toEqual(values);
    },
  );

  test.each([1, 2, 3, 10, 1000, 4096, 100_003])(
    'of %i points hits every cell exactly once, inside (0, 1)',
    (size) => {
      const out = new Float64Array(size);
      latinHypercube(size, { seed: 'a', stratum: 0, generation: 0, input: 'Mh' })(0, size, out);
      const cells = new Set(Array.from(out, (u) => Math.floor(u * size)));
      expect(cells.size).toBe(size);
      expect(out.every((u) => u > 0 && u < 1)).toBe(true);
    },
  );

  test('stays below 1 in the last cell and above 0 in the first, however far into them', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 100_000_000 }), (size) => {
        const last = placeInCell(size - 1, 1 - 2 ** -53, size);
        return last < 1 && last >= (size - 1) / size && placeInCell(0, 2 ** -53, size) > 0;
      }),
    );
  });

  test('spreads differently in different inputs', () => {
    const n = 10_000;
    const [a, b] = ['Mt', 'Mh'].map((input) => {
      const out = new Float64Array(n);
      latinHypercube(n, { seed: 'a', stratum: 0, generation: 0, input })(0, n, out);
      return out;
    });
    const correlation = a.reduce((sum, x, i) => sum + 12 * (x - 0.5) * (b[i] - 0.5), 0) / n;
    expect(Math.abs(correlation)).toBeLessThan(5 / Math.sqrt(n));
  });
});
