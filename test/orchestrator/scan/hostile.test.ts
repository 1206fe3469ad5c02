import { describe, expect, test } from 'vitest';
import { LARGEST_FILE } from '../../../orchestrator/scan/text.js';
import { mistakesOf } from './mistakes-of.js';

const GOOD = 'model: sm\nvary: { Mt: { range: [165, 180] } }\n';
const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

function join(...parts: Uint8Array[]): Uint8Array {
  return Uint8Array.from(parts.flatMap((part) => [...part]));
}

describe('what is not a scan file at all', () => {
  test.each<[string, string | Uint8Array, string]>([
    [
      'an empty file',
      '',
      'f:1:1: expected a scan file: a mapping with model, vary and so on, found an empty file',
    ],
    [
      'comments alone',
      '# nothing\n',
      'f:1:1: expected a scan file: a mapping with model, vary and so on, found an empty file',
    ],
    ['a word', 'hello', 'f:1:1: expected a scan file: a mapping with model, vary and so on, found "hello"'],
    [
      'a list',
      '- model: sm',
      'f:1:1: expected a scan file: a mapping with model, vary and so on, found a list of 1',
    ],
    [
      'two documents',
      `${GOOD}---\n${GOOD}`,
      'f:3:1: expected one document, found several, separated by "---" or "..."',
    ],
    [
      'a byte that is not UTF-8',
      join(bytes('model: sm\ntitle: caf'), Uint8Array.of(0xe9, 0x0a)),
      'f:2:11: expected text in UTF-8, found the byte 0xe9',
    ],
    [
      'a character cut short',
      join(bytes('title: '), Uint8Array.of(0xe2, 0x82)),
      'f:1:8: expected text in UTF-8, found the byte 0xe2',
    ],
    [
      'UTF-16',
      Uint8Array.from(Buffer.from('\ufeffmodel: sm', 'utf16le')),
      'f:1:1: expected text in UTF-8, found the byte 0xff',
    ],
    [
      'a surrogate in UTF-8',
      Uint8Array.of(0xed, 0xa0, 0x80),
      'f:1:1: expected text in UTF-8, found the byte 0xed',
    ],
    [
      'a control character',
      'model: sm\ntitle: a\u0007b',
      'f:2:9: expected printable text, found the control character U+0007',
    ],
    [
      'a binary file',
      Uint8Array.of(0x7f, 0x45, 0x4c, 0x46, 0),
      'f:1:1: expected printable text, found the control character U+007F',
    ],
    ['another version of YAML', `%YAML 1.1\n---\n${GOOD}`, 'f:1:1: expected no directives, found a % line'],
    [
      'a tag shorthand',
      `%TAG !e! tag:example.org,2000:\n---\n${GOOD}`,
      'f:1:1: expected no directives, found a % line',
    ],
  ])('%s is refused', (_what, file, mistake) => {
    expect(mistakesOf(file)).toEqual([mistake]);
  });

  test('a file of 100 MB is refused by its size, unread', () => {
    const huge = new Uint8Array(100 * 1024 * 1024).fill(0xff);
    expect(mistakesOf(huge)).toEqual([`f: expected at most ${LARGEST_FILE} bytes, found 104857600 bytes`]);
  });
});

describe('YAML that is more than it seems', () => {
  test.each<[string, string, string[]]>([
    [
      'a tag',
      `${GOOD}title: !!str 5\n`,
      ['f:3:14 title: expected plain values without tags, found "tag:yaml.org,2002:str"'],
    ],
    [
      "a tag of one's own",
      `${GOOD}fix: { MW: !python 80 }\n`,
      ['f:3:20 fix.MW: expected plain values without tags, found "!python"'],
    ],
    ['an anchor', `${GOOD}fix: { MW: &w 80 }\n`, ['f:3:15 fix.MW: expected no anchors, found &w']],
    [
      'an alias',
      `${GOOD}fix: { MW: *w }\n`,
      ['f:3:12 fix.MW: expected the value itself, found an alias, *w'],
    ],
    [
      'a merge',
      `${GOOD}fix: { <<: { MW: 80 } }\n`,
      [expect.stringMatching(/^f:3:8 fix\["<<"\]: expected one of .*, found "<<"$/) as string],
    ],
    [
      'a key twice',
      `${GOOD}seed: 1\nseed: 2\n`,
      ['f:4:1 seed: expected every key once, found a second "seed"'],
    ],
    [
      'an input twice',
      `${GOOD}fix: { MW: 80, MW: 81 }\n`,
      ['f:3:16 fix.MW: expected every key once, found a second "MW"'],
    ],
    ['a number as key', `${GOOD}fix: { 1: 80 }\n`, ['f:3:8 fix: expected a name as key, found 1']],
    [
      'a list as key',
      `${GOOD}? [a]\n: 1\n`,
      ['f:3:3: expected a name as key, found a list or mapping as key'],
    ],
    ['an empty key', `${GOOD}fix: { : 1 }\n`, ['f:3:7 fix: expected a name as key, found an empty value']],
    ['the prototype', `${GOOD}__proto__: { a: 1 }\n`, ['f:3:1: expected a known key, found "__proto__"']],
    [
      'the constructor',
      `${GOOD}fix: { constructor: 1 }\n`,
      [expect.stringMatching(/^f:3:8 fix.constructor: expected one of /) as string],
    ],
    [
      'a tab as indentation',
      'model: sm\nvary:\n\tMt: 1\n',
      ['f:3:1: expected valid YAML, found something else (tabs are not allowed as indentation)'],
    ],
    [
      'an open bracket',
      'model: sm\nvary: { Mt: { range: [165, 180 }\n',
      [expect.stringMatching(/^f:[23]:\d+: expected valid YAML/) as string],
    ],
    [
      'bad indentation',
      'model: sm\nvary:\n  Mt: { list: [170] }\n Mh: 3\n',
      [expect.stringMatching(/^f:4:1: expected valid YAML/) as string],
    ],
  ])('%s is refused', (_what, file, mistakes) => {
    const found = mistakesOf(file);
    if (found.length > mistakes.length) expect(found[0]).toEqual(mistakes[0]);
    else expect(found).toEqual(mistakes);
  });

  test('an alias bomb never explodes', () => {
    const levels = 'bcdefghi'.split('').map((name, i) => {
      const before = 'abcdefgh'[i];
      return `${name}: &${name} [${Array(9).fill(`*${before}`).join(', ')}]`;
    });
    const bomb = `${GOOD}a: &a [lol, lol]\n${levels.join('\n')}\n`;
    const mistakes = mistakesOf(bomb);
    expect(mistakes).toContain('f:3:7 a: expected no anchors, found &a');
    expect(mistakes).toContain('f:4:8 b[0]: expected the value itself, found an alias, *a');
    expect(mistakes.length).toBeLessThan(300);
  });
});

describe('a file that fills the size limit ends soon, in mistakes with places', () => {
  const room = LARGEST_FILE - 100;
  const filled = (part: string): string => part.repeat(Math.floor(room / part.length));
  test.each<[string, string]>([
    ['brackets', filled('[')],
    ['braces', filled('{a: ')],
    ['dashes', filled('- ')],
    ['question marks', filled('? ')],
    ['quotes', filled('"')],
    ['anchors', filled('&a ')],
    ['aliases as keys', filled('*a : ')],
    ['commas', `[${filled(',')}]`],
    ['empty lists', filled('[]')],
    ['directives', filled('%a\n')],
    ['exclamation marks', filled('!')],
    ['unknown sections', `model: sm\n${Array.from({ length: 20_000 }, (_, i) => `k${i}: 1`).join('\n')}\n`],
    ['unknown inputs', `${GOOD}fix:\n${Array.from({ length: 20_000 }, (_, i) => `  k${i}: 1`).join('\n')}\n`],
    [
      'definitions',
      `${GOOD}define:\n${Array.from({ length: 15_000 }, (_, i) => `  a${i}: a${i + 1}`).join('\n')}\n`,
    ],
    ['constraints', `${GOOD}require: [${filled('x, ').slice(0, -60)}]\n`],
    ['one long name', `${GOOD}${filled('a').slice(60)}: 1\n`],
    ['one long expression', `${GOOD}define: { a: ${filled('1+').slice(80)}1 }\n`],
    ['one deep expression', `${GOOD}define: { a: ${filled('(').slice(80)} }\n`],
    ['one deep list', `${GOOD}keep: ${'['.repeat(200)}${']'.repeat(200)}\n`],
    ['one bottomless list', `${GOOD}keep: ${'['.repeat(100_000)}\n`],
  ])('%s', (_what, file) => {
    const mistakes = mistakesOf(file);
    expect(mistakes.length).toBeGreaterThan(0);
    expect(mistakes.length).toBeLessThanOrEqual(201);
    for (const mistake of mistakes.slice(0, 200))
      expect(mistake).toMatch(/^f:\d+:\d+.*: expected .+, found .+/);
    for (const mistake of mistakes) expect(mistake).not.toContain('call stack');
    for (const mistake of mistakes) expect(mistake.length).toBeLessThan(1000);
  });
});
