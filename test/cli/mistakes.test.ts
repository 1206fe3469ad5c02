import { mkdirSync, readdirSync, truncateSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { document, newFolder, planeScan, trigpoint } from './trigpoint.js';

/** One clear line on standard error, status 2, nothing on standard output, nothing written, no stack trace. */
async function expectMistake(words: readonly string[], message: RegExp, folder = newFolder()): Promise<void> {
  const before = readdirSync(folder).sort();
  const { status, out, err } = await trigpoint(words, { cwd: folder });
  expect(err).toMatch(message);
  expect({ status, out }).toEqual({ status: 2, out: '' });
  expect(err.trimEnd().split('\n')).toHaveLength(1);
  expect(err).not.toMatch(/^\s+at /m);
  expect(readdirSync(folder).sort()).toEqual(before);
}

describe('a mistake in what was asked', () => {
  it.each([
    ['an unknown command', ['lanch', 'x.yaml'], /unknown command 'lanch' \(did you mean launch\?\)/],
    ['an unknown option', ['list', '--stor', 'x'], /unknown option '--stor' \(did you mean --store\?\)/],
    ['a missing argument', ['show'], /missing required argument 'run'/],
    ['an argument too many', ['list', 'x'], /too many arguments/],
    [
      'no such scan file',
      ['launch', 'x.yaml'],
      /x\.yaml: expected a file that can be read, found no such file/,
    ],
    ['a folder as scan file', ['check', '.'], /expected a file, found a folder/],
    ['no store', ['list'], /--store: expected a store.*found no file \.\/trigpoint\.sqlite/],
    ['an unknown model', ['point', 'sn'], /MODEL: expected a model: sm, found "sn" \(did you mean sm\?\)/],
    [
      'an unknown input',
      ['point', 'sm', '--set', 'Mtt=1'],
      /--set: expected an input .*"Mtt" \(did you mean Mt\?\)/,
    ],
    [
      'text for a number',
      ['point', 'sm', '--set', 'Mt=heavy'],
      /--set Mt: expected a finite number .*"heavy"/,
    ],
    ['no number', ['point', 'sm', '--set', 'Mt=NaN'], /--set Mt: expected a finite number .*"NaN"/],
    ['infinity', ['point', 'sm', '--set', 'Mt=1e999'], /--set Mt: expected a finite number .*"1e999"/],
    [
      'an input out of range',
      ['point', 'sm', '--set', 'Mt=1000'],
      /--set Mt: expected a value from .* GeV, found 1000/,
    ],
    [
      'an input twice',
      ['point', 'sm', '--set', 'Mt=173', 'Mt=174'],
      /--set: expected every name once, found Mt twice/,
    ],
    ['a word that sets nothing', ['point', 'sm', '--set', 'Mt'], /--set: expected name=value, found "Mt"/],
    ['a fourth loop', ['point', 'sm', '--loops', '4'], /--loops <n>.*'4' is invalid.*1, 2, 3/],
    [
      'an option the model lacks',
      ['point', 'sm', '--option', 'xH=1'],
      /--option: expected an option of sm, of which there is none, found "xH"/,
    ],
    [
      'couplings too large',
      ['betas', 'sm', '--at', 'yt=1e200'],
      /--at: expected couplings whose beta functions/,
    ],
    ['an unknown coupling', ['betas', 'sm', '--at', 'g4=1'], /--at: expected a coupling of sm: .*found "g4"/],
    [
      'couplings that disagree',
      ['betas', 'sm', '--at', 'gY=1', 'g1=3'],
      /--at: expected gY or g1 = sqrt\(5\/3\) gY/,
    ],
    ['an unknown constraint', ['constraints', 'vacum-stability'], /did you mean vacuum-stability\?/],
    ['a worker without a Redis', ['worker'], /worker: expected --redis URL or REDIS_URL, found neither/],
    [
      'a Redis that is no address',
      ['worker', '--redis', 'localhost'],
      /--redis: expected an address such as redis:/,
    ],
  ])('%s', (_, words, message) => expectMistake(words, message));

  it('a number of workers that makes no sense', async () => {
    const folder = newFolder();
    writeFileSync(join(folder, 'a.yaml'), planeScan(10));
    await expectMistake(
      ['launch', 'a.yaml', '--workers', '0'],
      /--workers: expected a whole number from 1/,
      folder,
    );
    await expectMistake(
      ['launch', 'a.yaml', '--workers', '2', '--redis', 'redis://localhost'],
      /expected either --workers or --redis, found both/,
      folder,
    );
  });

  it('a scan file of 100 MB, before it is read', async () => {
    const folder = newFolder();
    writeFileSync(join(folder, 'huge.yaml'), '');
    truncateSync(join(folder, 'huge.yaml'), 100_000_000);
    await expectMistake(['launch', 'huge.yaml'], /huge\.yaml:1:1: expected at most .*, found 100 MB/, folder);
  });

  it('a folder in place of the store', async () => {
    const folder = newFolder();
    mkdirSync(join(folder, 'a.sqlite'));
    const { status, err } = await trigpoint(['list', '--store', 'a.sqlite'], { cwd: folder });
    expect(status).toBe(3);
    expect(err).toContain('a.sqlite');
  });

  it('is told for every mistake of a scan file at its place, with the nearest name, and nothing is written', async () => {
    const folder = newFolder();
    writeFileSync(
      join(folder, 'bad.yaml'),
      planeScan(10).replace('Mt:', 'Mtt:').replace('[115, 135]', '[135, 115]'),
    );
    const { status, out, err } = await trigpoint(['launch', 'bad.yaml'], { cwd: folder });
    expect({ status, out }).toEqual({ status: 2, out: '' });
    const lines = err.trimEnd().split('\n');
    expect(lines[0]).toMatch(/^bad\.yaml:6:3 vary\.Mtt: expected .*, found "Mtt" \(did you mean "Mt"\?\)/);
    expect(lines[1]).toMatch(/^bad\.yaml:7:\d+ vary\.Mh/);
    expect(readdirSync(folder)).toEqual(['bad.yaml']);
  });
});

describe('with --json', () => {
  it('a mistake is a document too', async () => {
    const { error } = await document(['point', 'sm', '--set', 'Mtt=1']);
    expect(error).toMatchObject({ code: 'user-mistake', exit: 2 });
  });

  it('the mistakes of a file come with line and column', async () => {
    const folder = newFolder();
    writeFileSync(join(folder, 'bad.yaml'), planeScan(10).replace('Mt:', 'Mtt:'));
    const { error } = await document(['check', 'bad.yaml'], { cwd: folder });
    expect(error).toMatchObject({
      code: 'file-mistakes',
      file: 'bad.yaml',
      mistakes: [{ line: 6, column: 3, path: 'vary.Mtt' }],
    });
  });

  it('a stack trace is shown only where it is asked for', async () => {
    const words = ['point', 'sn'];
    expect((await trigpoint(words)).err).not.toMatch(/^\s+at /m);
    expect((await trigpoint(words, { env: { TRIGPOINT_DEBUG: '1' } })).err).toMatch(/^\s+at /m);
  });
});
