import { expect, test } from 'vitest';
import { readChange } from '../../../orchestrator/sampling/read-change.js';

test('a number is the new total, names give strata', () => {
  expect(readChange(['30000'], [])).toEqual({ points: 30000 });
  expect(readChange(['plane=30000', 'measured=9000'], [])).toEqual({
    points: { plane: 30000, measured: 9000 },
  });
});

test('ranges, grids and lists of inputs', () => {
  expect(readChange([], ['Mt=160:185', 'cutoff=1e3:1.22e19:41', 'alphaS=0.117,0.118,.119'])).toEqual({
    vary: {
      Mt: { range: [160, 185] },
      cutoff: { range: [1e3, 1.22e19], steps: 41 },
      alphaS: { list: [0.117, 0.118, 0.119] },
    },
  });
});

test.each([
  [['many'], [], /--points: expected a whole number or NAME=N, found "many"/],
  [['1e4'], [], /found "1e4"/],
  [['10', '20'], [], /expected NAME=N, every name once, found "10"/],
  [['a=1', 'a=2'], [], /every name once, found "a=2"/],
  [[], ['Mt'], /--vary: expected NAME=FROM:TO, every name once, found "Mt"/],
  [[], ['=1:2'], /found "=1:2"/],
  [[], ['Mt=160:'], /found "Mt=160:"/],
  [[], ['Mt=1:2:3:4'], /found "Mt=1:2:3:4"/],
  [[], ['Mt=NaN:2'], /found "Mt=NaN:2"/],
])('refuses %j %j', (points, vary, message) => {
  expect(() => readChange(points, vary)).toThrow(message);
});
