import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { padded, placing, ticksOf, type Axis } from '../../../dashboard/plots/axis.js';
import { plainText, upright } from '../../../dashboard/plots/label.js';

const axis = (low: number, high: number, scale: Axis['scale'] = 'linear'): Axis => ({
  label: upright('x'),
  unit: [],
  low,
  high,
  scale,
});
const printed = (one: Axis, wanted = 6): string[] =>
  ticksOf(one, wanted).major.map((tick) => plainText(tick.label));

describe('ticks', () => {
  it.each([
    [axis(165, 180), '166 168 170 172 174 176 178 180'],
    [axis(-0.02, 0.13), '−0.02 0.00 0.02 0.04 0.06 0.08 0.10 0.12'],
    [axis(-1, 1), '−1.0 −0.5 0.0 0.5 1.0'],
    [axis(1e4, 1.22e19, 'log'), '10^6 10^9 10^12 10^15 10^18'],
    [axis(0.1, 100, 'log'), '0.1 1 10 100'],
    [axis(110, 140, 'log'), '110 115 120 125 130 135 140'],
    [axis(1e-12, 1e-6, 'log'), '10^−12 10^−10 10^−8 10^−6'],
  ])('stand at round values (%#)', (one, expected) => {
    expect(printed(one).join(' ')).toBe(expected);
  });

  it('take a power of ten out of large numbers', () => {
    const { major, factor } = ticksOf(axis(-9e5, 3e5), 5);
    expect(factor).toBe(5);
    expect(major.map((tick) => plainText(tick.label))).toEqual(['−8', '−6', '−4', '−2', '0', '2']);
  });

  it('name the classes of a class', () => {
    const classes = { ...axis(-0.5, 2.5), categories: ['stable', 'metastable', 'unstable'] };
    expect(printed(classes)).toEqual(['stable', 'metastable', 'unstable']);
  });

  it('lie on the axis and never crowd it, whatever the range', () => {
    const range = fc.tuple(
      fc.double({ min: -1e12, max: 1e12, noNaN: true }),
      fc.double({ min: 1e-6, max: 1e9, noNaN: true }),
    );
    fc.assert(
      fc.property(range, fc.integer({ min: 3, max: 10 }), ([low, width], wanted) => {
        const { major, minor } = ticksOf(axis(low, low + width), wanted);
        expect(major.length).toBeLessThanOrEqual(2 * wanted + 2);
        expect(minor.length).toBeLessThanOrEqual(60);
        const rounding = Number.EPSILON * (Math.abs(low) + width);
        for (const { value } of major) {
          expect(value).toBeGreaterThanOrEqual(low - rounding);
          expect(value).toBeLessThanOrEqual(low + width + rounding);
        }
      }),
    );
  });
});

describe('axes', () => {
  it('place values linearly or by their logarithm', () => {
    expect(placing(axis(100, 200), 0, 50)(150)).toBeCloseTo(25, 12);
    expect(placing(axis(1e2, 1e18, 'log'), 0, 16)(1e10)).toBeCloseTo(8, 12);
  });

  it.each([
    [padded(5, 5, 'linear'), 5],
    [padded(0, 0, 'linear'), 0],
    [padded(1e5, 1e5, 'log'), 1e5],
  ])('around a single value are not empty (%#)', ([low, high], value) => {
    expect(low).toBeLessThan(value);
    expect(high).toBeGreaterThan(value);
  });

  it('exist even without data', () => {
    expect(padded(Infinity, -Infinity, 'log')).toEqual([1, 10]);
  });
});
