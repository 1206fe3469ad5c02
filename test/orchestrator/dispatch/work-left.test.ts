import { describe, expect, test } from 'vitest';
import { WorkLeft, type Portion } from '../../../orchestrator/dispatch/work-left.js';
import { mergeSpans } from '../../../orchestrator/store/spans.js';

const span = (first: number, count: number, stratum = 0) => ({ stratum, first, count });
const tried = (first: number, count: number, attempts: number) => ({ ...span(first, count), attempts });

/** Everything that is left, in the order in which it would be dispatched. */
function drain(left: WorkLeft, size: number): Portion[] {
  const portions: Portion[] = [];
  for (let p = left.take(size); p; p = left.take(size)) portions.push(p);
  return portions;
}
const spansOf = (portions: readonly Portion[]) => portions.map((p) => [p.stratum, p.first, p.count]);

describe('fresh points', () => {
  test('are cut at multiples of the size', () => {
    const left = new WorkLeft([span(0, 150), span(0, 10, 1)], []);
    expect(spansOf(drain(left, 64))).toEqual([
      [0, 0, 64],
      [0, 64, 64],
      [0, 128, 22],
      [1, 0, 10],
    ]);
    expect(left.points).toBe(0);
  });

  test('never make a chunk across a segment of 4096', () => {
    const left = new WorkLeft([span(4000, 5000)], []);
    expect(spansOf(drain(left, 1 << 20))).toEqual([
      [0, 4000, 96],
      [0, 4096, 4096],
      [0, 8192, 808],
    ]);
  });

  test('are aligned after a gap, whatever the size was before', () => {
    const left = new WorkLeft([span(10, 90)], []);
    expect(spansOf([left.take(16)!, left.take(64)!, left.take(16)!])).toEqual([
      [0, 10, 6],
      [0, 16, 48],
      [0, 64, 16],
    ]);
    expect(left.points).toBe(20);
  });
});

describe('a lost portion', () => {
  test('is tried again whole once, then halved at every loss down to one point', () => {
    const left = new WorkLeft([span(0, 4)], []);
    const sizes: number[] = [];
    // Point 2 kills whoever works on it.
    for (let p = left.take(4); p; p = left.take(4)) {
      sizes.push(p.count);
      if (p.first <= 2 && 2 < p.first + p.count) left.lost(p, 'worker-died', 'status 3');
    }
    expect(sizes).toEqual([4, 4, 2, 2, 1, 1, 1, 1]);
    expect(left.takeGivenUp()).toEqual([{ stratum: 0, index: 2, reason: 'worker-died: status 3' }]);
    expect(left.takeGivenUp()).toEqual([]);
    expect(left.points).toBe(0);
  });

  test('a death is blamed on a single point only after it was alone', () => {
    const left = new WorkLeft([span(0, 1)], []);
    const alone: boolean[] = [];
    for (let p = left.take(1); p; p = left.take(1)) {
      alone.push(p.alone);
      left.lost(p, 'worker-died', '');
    }
    expect(alone).toEqual([false, false, true]);
  });

  test('one that was returned is not blamed, however often', () => {
    const left = new WorkLeft([span(0, 1)], []);
    for (let i = 0; i < 50; i += 1) left.returned(left.take(1)!);
    expect(left.points).toBe(1);
    expect(left.takeGivenUp()).toEqual([]);
  });
});

describe('after the death of a coordinator', () => {
  test('goes on with the same portions, alone, and cuts the rest afresh', () => {
    const left = new WorkLeft([span(0, 256)], [tried(64, 64, 1), tried(128, 64, 1)]);
    expect(left.nextIsAlone).toBe(true);
    const portions = drain(left, 128);
    expect(spansOf(portions)).toEqual([
      [0, 64, 64],
      [0, 128, 64],
      [0, 0, 64],
      [0, 192, 64],
    ]);
    expect(portions.map((p) => [p.losses, p.alone])).toEqual([
      [1, true],
      [1, true],
      [0, false],
      [0, false],
    ]);
  });

  test('a portion with two attempts is halved, and its halves where they were tried too', () => {
    const record = [tried(0, 64, 2), tried(0, 32, 1), tried(16, 16, 1)];
    const left = new WorkLeft([span(0, 64)], record);
    expect(spansOf(drain(left, 64))).toEqual([
      [0, 0, 16],
      [0, 16, 8],
      [0, 24, 8],
      [0, 32, 32],
    ]);
  });

  test('committed parts of what was tried are not done again', () => {
    const left = new WorkLeft([span(0, 32), span(48, 16)], [tried(0, 64, 2)]);
    expect(spansOf(drain(left, 64))).toEqual([
      [0, 0, 32],
      [0, 48, 16],
    ]);
    expect(left.points).toBe(0);
  });

  test('a single point with three attempts is given up: a restart cannot loop on it', () => {
    const left = new WorkLeft([span(0, 64)], [tried(7, 1, 3)]);
    expect(left.takeGivenUp()).toEqual([
      { stratum: 0, index: 7, reason: 'worker-died: the whole program died with it' },
    ]);
    expect(spansOf(drain(left, 64))).toEqual([
      [0, 0, 7],
      [0, 8, 56],
    ]);
  });

  test('a point that kills the program is found within a bounded number of launches', () => {
    const poison = 1000;
    const committed = new Set<number>();
    const attempts = new Map<string, ReturnType<typeof tried>>();
    const pointsOf = ({ first, count }: { first: number; count: number }) =>
      Array.from({ length: count }, (_, i) => first + i);
    const isOpen = (s: { first: number; count: number }) => pointsOf(s).some((i) => !committed.has(i));
    let launches = 0;
    for (let alive = false; !alive; launches += 1) {
      const open = pointsOf(span(0, 4096)).filter((i) => !committed.has(i));
      const left = new WorkLeft(
        mergeSpans(open.map((i) => span(i, 1))),
        [...attempts.values()].filter(isOpen),
      );
      for (const { index } of left.takeGivenUp()) committed.add(index);
      alive = true;
      for (let p = left.take(4096); p && alive; p = left.take(4096)) {
        const key = `${p.first}.${p.count}`;
        attempts.set(key, tried(p.first, p.count, (attempts.get(key)?.attempts ?? 0) + 1));
        alive = !pointsOf(p).includes(poison);
        if (alive) pointsOf(p).forEach((i) => committed.add(i));
      }
    }
    // Twice whole, eleven halves, three times the point, and the launch that finishes.
    expect(launches).toBe(17);
    expect(committed.size).toBe(4096);
  });
});
