import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { assignments, finiteNumber, numberAssignments } from '../../../orchestrator/commands/assignments.js';
import { filterMistake } from '../../../orchestrator/commands/check-filter.js';
import { differencesOfPlans, inWords } from '../../../orchestrator/commands/differences.js';
import { findRun } from '../../../orchestrator/commands/find-run.js';
import { quoted } from '../../../orchestrator/commands/shell.js';
import type { Reading } from '../../../orchestrator/store/reading.js';
import type { RunRecord } from '../../../orchestrator/store/records.js';

describe('name=value words', () => {
  it('are read as they are written', () => {
    expect(numberAssignments(['Mt=173.34', 'cutoff=1.2209e19', 'x=-.5'], '--set')).toEqual({
      Mt: 173.34,
      cutoff: 1.2209e19,
      x: -0.5,
    });
    expect(assignments(['type=a=b'], '--option')).toEqual({ type: 'a=b' });
  });

  it('give back every finite number exactly', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (x) => {
        expect(finiteNumber(String(x), 'x')).toBe(Object.is(x, -0) ? 0 : x);
      }),
    );
  });

  it.each(['', ' ', '0x10', '1_000', '1e', 'NaN', 'Infinity', '1e999', '1,5', '--1'])('refuse %j', (text) => {
    expect(() => finiteNumber(text, '--set Mt')).toThrow(/--set Mt: expected a finite number/);
  });

  it('cannot reach what every object has', () => {
    expect(Object.entries(assignments(['__proto__=1', 'constructor=2'], 'x'))).toEqual([
      ['__proto__', '1'],
      ['constructor', '2'],
    ]);
  });
});

describe('RUN', () => {
  const digest = (letter: string) => `sha256:${letter.repeat(8)}${'0'.repeat(56)}`;
  const runs = [
    { id: 1, digest: digest('a') },
    { id: 2, digest: digest('a') },
    { id: 3, digest: digest('b') },
    { id: 12, digest: null },
  ] as RunRecord[];
  const store = (list: RunRecord[]) => ({ runs: () => list }) as unknown as Reading;
  const find = (word: string, list = runs) => findRun(store(list), word).id;

  it('is an id, latest, or the beginning of a digest', () => {
    expect(find('3')).toBe(3);
    expect(find('latest')).toBe(12);
    expect(find('bbbbbb')).toBe(3);
    expect(find('sha256:BBBBBBBB')).toBe(3);
  });

  it('is the first of several runs with one digest, which have the same results', () => {
    expect(find('aaaaaaaa')).toBe(1);
  });

  it('that does not exist is answered with those that do', () => {
    expect(() => find('7')).toThrow(/found "7" \(there are runs 1, 2, 3, 12\)/);
    expect(() => find('latest', [])).toThrow(/the store has no run yet/);
  });

  it('must not fit different digests', () => {
    const two = [...runs, { id: 13, digest: `sha256:${'a'.repeat(64)}` } as RunRecord];
    expect(() => find('aaaaaaa', two)).toThrow(/runs 1, 2, 13/);
  });
});

describe('differences of plans', () => {
  it('are named by their path', () => {
    const first = { seed: '1', strata: [{ points: 10 }, { points: 5 }] };
    const second = { seed: '1', strata: [{ points: 20 }] };
    expect(differencesOfPlans(first, second)).toEqual([
      { kind: 'plan', where: 'strata[0].points', first: '10', second: '20' },
      { kind: 'plan', where: 'strata[1]', first: '{"points":5}', second: 'absent' },
    ]);
    expect(inWords(differencesOfPlans(first, second))).toBe(
      'strata[0].points was 10, is 20; strata[1] was {"points":5}, is absent',
    );
  });

  it('of a plan and itself are none', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (plan) => {
        expect(differencesOfPlans(plan, plan)).toEqual([]);
      }),
    );
  });
});

describe('a filter', () => {
  const columns = ['Mt', 'verdict', 'outcome(vacuum-stability)'];

  it.each(['', '  ', 'Mt < 172', 'surviving and met(vacuum-stability)'])('%j is right', (where) => {
    expect(filterMistake(where, columns)).toBeNull();
  });

  it('with an unknown name is told where it stands and what is near', () => {
    expect(filterMistake('1 < Mtt', columns)).toEqual({
      position: 4,
      expected: 'the name of a column',
      found: 'Mtt',
      hint: 'did you mean Mt?',
    });
  });

  it('that cannot be read is told where', () => {
    expect(filterMistake('Mt < ', columns)).toMatchObject({ position: expect.any(Number) as number });
  });
});

describe('words for a shell', () => {
  it.each([
    ['Mt=173.34', 'Mt=173.34'],
    ['scans/a b.yaml', "'scans/a b.yaml'"],
    ["it's", `'it'\\''s'`],
    ['$(x)', "'$(x)'"],
  ])('%j is written %s', (word, written) => {
    expect(quoted(word)).toBe(written);
  });
});
