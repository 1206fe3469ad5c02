import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { mistakesOf } from './mistakes-of.js';

interface Case {
  readonly what: string;
  readonly file: string;
  readonly mistake: string;
}

/** The cases of mistakes.txt. */
function cases(): Case[] {
  const text = readFileSync(new URL('./mistakes.txt', import.meta.url), 'utf8');
  const blocks = text.trim().split('\n\n').slice(1);
  return blocks.map((block) => {
    const lines = block.split('\n');
    const written = lines.slice(1, -1).join('\n');
    return { what: lines[0].slice(2), file: completed(written), mistake: lines[lines.length - 1].slice(3) };
  });
}

function completed(written: string): string {
  if (written.startsWith('model')) return written;
  const varies = /^vary:/m.test(written);
  return `model: sm\n${written}\n${varies ? '' : 'vary: { mb: { range: [4, 5] } }\n'}`;
}

test.each(cases())(
  '$what is reported with its place, what was expected and what was found',
  ({ file, mistake }) => {
    expect(mistakesOf(file)).toEqual([mistake]);
  },
);

test('a file without a model is reported at its beginning', () => {
  const mistakes = mistakesOf('vary: { Mt: { range: [165, 180] } }');
  expect(mistakes).toEqual(['f:1:1 model: expected a model: sm, found none']);
});

test('a call of anything but a function of the language is reported', () => {
  const [mistake, ...rest] = mistakesOf('model: sm\nvary: { Mt: { list: [170] } }\ndefine: { r: eval(Mt) }');
  expect(mistake).toMatch(/^f:3:1[48] define\.r: expected .*, found /);
  expect(rest).toEqual([]);
});

test('all mistakes of a file are reported at once, in its order', () => {
  const file = `modl: sm
model: sm
seed: [1]
vary:
  Mt: { range: [180, 165], unit: kg }
  alphas: { list: [.nan] }
fix: { mt: 3 }
define: { a: b, b: a, c: 1 + }
running: { loops: 7 }
require: [perturbative, { vacuum-stability: { accept: maybe } }]
keep: [nothing]
`;
  const places = mistakesOf(file).map((line) => line.split(' ').slice(0, 2).join(' '));
  expect(places).toEqual([
    'f:1:1 modl:',
    'f:3:7 seed:',
    'f:5:34 vary.Mt.unit:',
    'f:6:3 vary.alphas:',
    'f:6:20 vary.alphas.list[0]:',
    'f:7:8 fix.mt:',
    'f:8:14 define.a:',
    'f:8:29 define.c:',
    'f:9:19 running.loops:',
    'f:10:11 require[0]:',
    'f:10:55 require[1].vacuum-stability.accept:',
    'f:11:8 keep[0]:',
  ]);
});

test('an expression over several lines or with escapes is placed at its beginning', () => {
  const file = 'model: sm\nvary: { Mt: { list: [170] } }\ndefine:\n  r: "Mt \\u002b Mhh"\n';
  expect(mistakesOf(file)[0]).toMatch(
    /^f:4:6 define.r: expected an input or another definition, found "Mhh"/,
  );
});
