import { describe, expect, it } from 'vitest';
import { shareOfPoints, shareText } from '../../dashboard/share.js';

describe('the share of points and its uncertainty', () => {
  /** The limits are the two roots of (s - p)^2 = z^2 p (1 - p)/n, which is how Wilson (J. Am. Stat. Assoc. 22 (1927)
   *  209, doi:10.1080/01621459.1927.10502953) defines them. */
  it.each([
    [0, 10],
    [3, 10],
    [500, 1000],
    [1000, 1000],
  ])('%d of %d: both limits solve the defining equation', (part, whole) => {
    const interval = shareOfPoints(part, whole);
    expect(interval).not.toBeNull();
    const { share, low, high } = interval!;
    for (const p of [low, high]) expect((share - p) ** 2).toBeCloseTo((p * (1 - p)) / whole, 12);
    expect(low).toBeLessThanOrEqual(share);
    expect(high).toBeGreaterThanOrEqual(share);
    expect(high).toBeGreaterThan(low);
  });

  it('approaches the square root of p (1 - p) / n where points are many', () => {
    const { share, high } = shareOfPoints(300_000, 1_000_000)!;
    expect(high - share).toBeCloseTo(Math.sqrt((0.3 * 0.7) / 1e6), 6);
  });

  it('says nothing of no points, and gives as many digits as the uncertainty deserves', () => {
    expect(shareOfPoints(0, 0)).toBeNull();
    expect(shareText(3, 10)).toBe('30 %');
    expect(shareText(6120, 20000)).toBe('30.6 %');
  });
});
