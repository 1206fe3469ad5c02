/** The coefficients satisfy what the book proves of them, to rounding: every order condition, not a selection. */
import { describe, expect, it } from 'vitest';
import * as tableau from '../../../workers/numerics/dop853-tableau.js';
import { density, elementaryWeights, treesOf } from './rooted-trees.js';
import type { Tree } from './rooted-trees.js';

const STAGES = 16;
const coefficients: Readonly<Record<string, number>> = tableau;
const indices = Array.from({ length: STAGES }, (_, i) => i + 1);
const coefficient = (name: string): number => coefficients[name] ?? 0;
const b = indices.map((j) => coefficient(`b${j}`));
/** Stage 13 is the new state: its weights are those of the solution. */
const a = indices.map((i) => (i === 13 ? b : indices.map((j) => coefficient(`a${i}_${j}`))));
const c = indices.map((i) => (i === 1 ? 0 : i === 12 || i === 13 ? 1 : coefficient(`c${i}`)));
const e = indices.map((j) => coefficient(`e${j}`));
const bhat = indices.map((j) => coefficient(`bhat${j}`));

/** The largest weight is 43, so that sums of products round at some 1e-14. */
const ROUNDING = 2e-13;

const upTo = (order: number): Tree[] => Array.from({ length: order }, (_, i) => treesOf(i + 1)).flat();
const dot = (weights: readonly number[], values: readonly number[]): number =>
  weights.reduce((sum, weight, j) => sum + weight * values[j], 0);
const defect = (tree: Tree, weights: readonly number[]): number =>
  dot(weights, elementaryWeights(tree, a)) - 1 / density(tree);
const largest = (values: readonly number[]): number => Math.max(...values.map(Math.abs));

/** Weights of the dense output at x, from the formula of section II.6 applied to unit derivatives. */
function denseWeights(x: number): number[] {
  return indices.map((j) => {
    const rise = b[j - 1];
    const [start, end] = [j === 1 ? 1 : 0, j === 13 ? 1 : 0];
    const terms = [
      rise,
      start - rise,
      2 * rise - start - end,
      ...[4, 5, 6, 7].map((k) => coefficient(`d${k}_${j}`)),
    ];
    return terms.reduceRight((sum, term, k) => (sum + term) * (k % 2 === 0 ? x : 1 - x), 0);
  });
}

describe('rooted trees', () => {
  it('are as many as published (OEIS A000081)', () => {
    expect([1, 2, 3, 4, 5, 6, 7, 8].map((n) => treesOf(n).length)).toEqual([1, 1, 2, 4, 9, 20, 48, 115]);
  });

  it('give 1/gamma for the classical method up to its order 4, and not beyond', () => {
    const classic = [
      [0, 0, 0, 0],
      [0.5, 0, 0, 0],
      [0, 0.5, 0, 0],
      [0, 0, 1, 0],
    ];
    const weights = [1 / 6, 1 / 3, 1 / 3, 1 / 6];
    const defects = (order: number): number[] =>
      treesOf(order).map((tree) => dot(weights, elementaryWeights(tree, classic)) - 1 / density(tree));
    expect(largest([1, 2, 3, 4].flatMap(defects))).toBeLessThan(1e-15);
    expect(largest(defects(5))).toBeGreaterThan(1e-3);
  });
});

describe('the tableau', () => {
  it.each(indices)('row %d adds up to its node', (i) => {
    expect(
      dot(
        a[i - 1],
        indices.map(() => 1),
      ),
    ).toBeCloseTo(c[i - 1], 13);
  });

  it('has order 8: all 200 conditions', () => {
    expect(upTo(8)).toHaveLength(200);
    expect(largest(upTo(8).map((tree) => defect(tree, b)))).toBeLessThan(ROUNDING);
  });

  it('has not order 9', () => {
    expect(largest(treesOf(9).map((tree) => defect(tree, b)))).toBeGreaterThan(1e-7);
  });

  it('has an error estimate that vanishes up to order 5 and not at 6', () => {
    const estimate = (tree: Tree): number => dot(e, elementaryWeights(tree, a));
    expect(largest(upTo(5).map(estimate))).toBeLessThan(ROUNDING);
    expect(largest(treesOf(6).map(estimate))).toBeGreaterThan(1e-6);
  });

  it('has an embedded solution of order 3 and not 4', () => {
    expect(largest(upTo(3).map((tree) => defect(tree, bhat)))).toBeLessThan(ROUNDING);
    expect(largest(treesOf(4).map((tree) => defect(tree, bhat)))).toBeGreaterThan(1e-4);
  });

  it.each([0, 0.1, 0.25, 0.5, 0.8, 1])('has dense output of order 7 at %d of the step', (x) => {
    const weights = denseWeights(x);
    // Coefficients up to 600 here.
    for (const tree of upTo(7)) {
      const wanted = Math.pow(x, tree.nodes) / density(tree);
      expect(Math.abs(dot(weights, elementaryWeights(tree, a)) - wanted)).toBeLessThan(20 * ROUNDING);
    }
  });
});
