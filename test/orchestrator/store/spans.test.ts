import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { intersectSpans, mergeSpans, splitSpan, subtractSpans } from '../../../orchestrator/store/spans.js';
import type { Span } from '../../../orchestrator/store/writing.js';

const span = fc.record({
  stratum: fc.integer({ min: 0, max: 1 }),
  first: fc.integer({ min: 0, max: 40 }),
  count: fc.integer({ min: 1, max: 15 }),
});

/** The oracle: plain sets of points. */
function pointsOf(spans: readonly Span[]): string[] {
  const points = new Set<string>();
  for (const { stratum, first, count } of spans) {
    for (let i = 0; i < count; i++) points.add(`${stratum}.${String(first + i).padStart(3, '0')}`);
  }
  return [...points].sort();
}

describe('spans agree with sets of points', () => {
  it('merging keeps the points and leaves gaps between spans', () => {
    fc.assert(
      fc.property(fc.array(span), (spans) => {
        const merged = mergeSpans(spans);
        expect(pointsOf(merged)).toEqual(pointsOf(spans));
        merged.slice(1).forEach((next, i) => {
          const before = merged[i];
          const apart = next.stratum > before.stratum || next.first > before.first + before.count;
          expect(apart).toBe(true);
        });
      }),
    );
  });

  it('subtracting leaves what is in the one and not in the others', () => {
    fc.assert(
      fc.property(span, fc.array(span), (whole, taken) => {
        const gone = new Set(pointsOf(taken));
        const left = subtractSpans(whole, taken);
        expect(pointsOf(left)).toEqual(pointsOf([whole]).filter((point) => !gone.has(point)));
        expect(mergeSpans(left)).toEqual(left);
      }),
    );
  });

  it('intersecting keeps the common points', () => {
    fc.assert(
      fc.property(span, span, (a, b) => {
        const common = intersectSpans(a, b);
        const other = new Set(pointsOf([b]));
        expect(pointsOf(common ? [common] : [])).toEqual(pointsOf([a]).filter((point) => other.has(point)));
      }),
    );
  });

  it('splitting cuts at multiples and nowhere else', () => {
    fc.assert(
      fc.property(span, fc.integer({ min: 1, max: 9 }), (whole, size) => {
        const parts = splitSpan(whole, size);
        expect(mergeSpans(parts)).toEqual([whole]);
        for (const part of parts) {
          expect(Math.floor(part.first / size)).toBe(Math.floor((part.first + part.count - 1) / size));
        }
        for (const part of parts.slice(1)) expect(part.first % size).toBe(0);
      }),
    );
  });
});
