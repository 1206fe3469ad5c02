import { describe, expect, it } from 'vitest';
import {
  countText,
  digestShort,
  durationText,
  momentText,
  valueHtml,
  valueText,
} from '../../dashboard/numbers.js';

describe('numbers on pages', () => {
  it.each([
    [173.34, '<data value="173.34">173.34</data>'],
    [1.2209e19, '<data value="12209000000000000000">1.2209&thinsp;×&thinsp;10<sup>19</sup></data>'],
    [-0.0000143, '<data value="-0.0000143">−1.43&thinsp;×&thinsp;10<sup>−5</sup></data>'],
    [0.1234567891, '<data value="0.1234567891">0.123457</data>'],
    [0, '<data value="0">0</data>'],
    [999999.7, '<data value="999999.7">1000000</data>'],
  ])('%d', (value, expected) => {
    expect(valueHtml(value).text).toBe(expected);
  });

  it('says that a value is absent, in words too', () => {
    expect(valueHtml(NaN).text).toContain('absent');
    expect(valueText(null)).toBe('absent');
  });

  it('writes a number with all its digits and no more', () => {
    expect(valueHtml(1.1663788e-5, 'all').text).toBe(
      '<data value="0.000011663788">1.1663788&thinsp;×&thinsp;10<sup>−5</sup></data>',
    );
    expect(valueHtml(0.1 + 0.2, 'all').text).toBe(
      '<data value="0.30000000000000004">0.30000000000000004</data>',
    );
  });

  it('keeps every digit where seventeen are asked', () => {
    expect(Number(valueText(0.1 + 0.2, 17))).toBe(0.1 + 0.2);
  });

  it('groups counts, shortens digests, and tells times and moments', () => {
    expect(countText(1234567)).toBe('1\u202f234\u202f567');
    expect(digestShort('sha256:0123456789abcdef')).toBe('0123456789ab');
    expect([0.25, 4.21, 102.4, 7265].map(durationText)).toEqual([
      '250 ms',
      '4.2 s',
      '1 min 42 s',
      '2 h 1 min',
    ]);
    expect(momentText('2026-12-01T04:45:16.123Z')).toBe('2026-12-01 04:45 UTC');
  });
});
