import { describe, expect, it } from 'vitest';
import { bytes, count, duration, share, value, withUnit } from '../../../orchestrator/terminal/numbers.js';
import { table } from '../../../orchestrator/terminal/table.js';

describe('numbers for people', () => {
  it.each([
    [count(0), '0'],
    [count(999), '999'],
    [count(1234567), '1,234,567'],
    [share(1, 3), '33.3 %'],
    [share(0, 0), ''],
    [duration(0.0321), '32 ms'],
    [duration(9.94), '9.9 s'],
    [duration(59.6), '1 min 0 s'],
    [duration(102), '1 min 42 s'],
    [duration(3725), '1 h 2 min'],
    [bytes(999), '999 bytes'],
    [bytes(20_480), '20.5 kB'],
    [bytes(767e6), '767 MB'],
    [value(0.6153714123), '0.6153714'],
    [value(-0.0143), '-0.0143'],
    [value(1.2209e19), '1.2209e+19'],
    [value(6e-12), '6e-12'],
    [value(0), '0'],
    [value(null), '-'],
    [value(NaN), '-'],
    [withUnit(173.34, 'GeV'), '173.34 GeV'],
    [withUnit(0.118, '1'), '0.118'],
  ])('%s', (written, wanted) => {
    expect(written).toBe(wanted);
  });
});

describe('a table', () => {
  it('puts numbers to the right and text to the left, without trailing blanks', () => {
    const rows = [
      ['surviving', '6,120', '30.6 %'],
      ['unfinished', '0', ''],
    ];
    expect(table(['verdict', 'points', ''], rows)).toBe(
      ['verdict     points', 'surviving    6,120  30.6 %', 'unfinished       0'].join('\n'),
    );
  });
});
