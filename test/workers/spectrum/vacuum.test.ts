import { describe, expect, it } from 'vitest';
import { running } from '../../../workers/running/running.js';
import { Trajectories } from '../../../workers/running/trajectory.js';
import { vacuum } from '../../../workers/spectrum/vacuum.js';
import { blockOf, goldenPoints } from '../../golden/standard-model/points.js';
import type { GoldenPoint } from '../../golden/standard-model/points.js';

/* Oracle: test/golden/standard-model/make.py, where scipy finds the same things on a fine grid. */

function judge(points: readonly GoldenPoint[], tolerance = 1e-10): (name: string, i?: number) => number {
  const block = blockOf(points);
  const trajectories = new Trajectories(points[0].loops);
  running({ loops: points[0].loops, tolerance }, trajectories).evaluate(block);
  vacuum(trajectories).evaluate(block);
  expect([...block.failure]).toEqual(points.map(() => 0));
  return (name, i = 0) => block.columns.get(name)![i];
}

/** Quantity, how close in what: scales by their ratio, the rest absolutely. */
const COMPARED = [
  ['lambdaMin', 1e-10, 'absolute'],
  ['lambdaMinScale', 1e-6, 'ratio'],
  ['lambdaZeroScale', 1e-6, 'ratio'],
  ['lambdaEffMin', 1e-10, 'absolute'],
  ['instabilityScale', 1e-6, 'ratio'],
  ['barrierHeight', 1e-6, 'ratio'],
  ['barrierField', 1e-6, 'ratio'],
  ['metastabilityMargin', 1e-10, 'absolute'],
  ['vacuumDecayExponent', 1e-6, 'ratio'],
  ['vacuumDecayRate', 1e-6, 'ratio'],
  ['vacuumClass', 0, 'absolute'],
] as const;

describe('the vacuum against scipy', () => {
  it.each(goldenPoints.map((point) => [point.name, point] as const))('%s', (_, point) => {
    const value = judge([point]);
    for (const [name, error, kind] of COMPARED) {
      const expected = point.expected[name];
      const found = value(name);
      if (expected === null) expect([name, found]).toEqual([name, NaN]);
      else {
        const off = kind === 'ratio' ? found / expected - 1 : found - expected;
        expect([name, Math.abs(off) <= error, found, expected]).toEqual([name, true, found, expected]);
      }
    }
  });
});

describe('what the quantities promise each other', () => {
  it('a barrier lies below the instability, both above the zero of lambda at M_t', () => {
    const centre = goldenPoints[0];
    const value = judge([centre]);
    expect(value('barrierField')).toBeLessThan(value('instabilityScale'));
    expect(value('lambdaZeroScale')).toBeLessThan(value('barrierField'));
    expect(value('barrierHeight')).toBeLessThan(value('barrierField'));
  });

  it('probability one and margin zero are the same border', () => {
    const base = goldenPoints.find((point) => point.name === 'heavy top: unstable')!;
    let [metastable, unstable] = [0.95, base.start.yt];
    for (let i = 0; i < 40; i++) {
      const yt = (metastable + unstable) / 2;
      const inside = judge([{ ...base, start: { ...base.start, yt } }])('vacuumClass') === 1;
      [metastable, unstable] = inside ? [yt, unstable] : [metastable, yt];
    }
    const value = judge([{ ...base, start: { ...base.start, yt: metastable } }]);
    expect(value('metastabilityMargin')).toBeCloseTo(0, 9);
    expect(value('vacuumDecayExponent')).toBeCloseTo(0, 5);
  });

  it('a dip of lambda below zero between two samples is found', () => {
    // Just below the border lambda is negative only near its minimum at 4e17 GeV.
    const base = goldenPoints.find((point) => point.name === 'close to the border')!;
    let [positive, negative] = [0.92, base.start.yt];
    for (let i = 0; i < 30; i++) {
      const yt = (positive + negative) / 2;
      const below = judge([{ ...base, start: { ...base.start, yt } }])('lambdaMin') < 0;
      [positive, negative] = below ? [positive, yt] : [yt, negative];
    }
    const value = judge([{ ...base, start: { ...base.start, yt: negative } }]);
    expect(value('lambdaMin')).toBeLessThan(0);
    expect(value('lambdaMin')).toBeGreaterThan(-1e-9);
    expect(value('lambdaZeroScale') / value('lambdaMinScale')).toBeGreaterThan(0.9);
    const safe = judge([{ ...base, start: { ...base.start, yt: positive } }]);
    expect(safe('lambdaZeroScale')).toBeNaN();
  });

  it('a point has the same bits alone and among others', () => {
    const same = goldenPoints.filter((point) => point.loops === 3);
    const together = judge(same);
    same.forEach((point, i) => {
      const alone = judge([point]);
      for (const [name] of COMPARED) expect(together(name, i)).toBe(alone(name));
    });
  });
});
