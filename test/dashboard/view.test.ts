import { describe, expect, it } from 'vitest';
import type { ColumnRecord } from '../../orchestrator/store/records.js';
import { compile } from '../../workers/expressions/compile.js';
import { conditionsOf } from '../../dashboard/conditions.js';
import { readView, viewQuery, wholeFilter } from '../../dashboard/view.js';

const base = { unit: 'GeV', symbol: 'x', meaning: 'something' } as const;
const columns: ColumnRecord[] = [
  { ...base, name: 'Mt', kind: 'input' },
  { ...base, name: 'Mh', kind: 'input' },
  { ...base, name: 'vacuumClass', kind: 'quantity', labels: ['stable', 'metastable', 'unstable'] },
  {
    ...base,
    name: 'outcome(vacuum-stability)',
    kind: 'outcome',
    constraint: 'vacuum-stability',
    labels: ['met', 'violated', 'not-applicable'],
  },
  { ...base, name: 'margin(vacuum-stability)', kind: 'margin', constraint: 'vacuum-stability' },
  { ...base, name: 'verdict', kind: 'point', labels: ['surviving', 'excluded', 'failed', 'unfinished'] },
];
const usual = { x: 'Mh', y: 'Mt', colour: 'vacuumClass', columns: ['verdict', 'Mt'] };
const strata = [
  { name: 'plane', points: 10, vary: [{ input: 'Mh' }, { input: 'Mt' }] },
  { name: 'line', points: 20, vary: [{ input: 'Mt' }] },
  { name: 'plane+1', points: 15, vary: [{ input: 'Mh' }, { input: 'Mt' }] },
];
const offered = conditionsOf({ plan: JSON.stringify({ strata }) }, columns);
const read = (query: string) => readView(new URLSearchParams(query), columns, usual, offered);

describe('the view in the address', () => {
  it('is the usual one where the address says nothing', () => {
    const { view, mistakes } = read('');
    expect(mistakes).toEqual([]);
    expect(view).toMatchObject({ ...usual, where: '', only: [], ranges: [], page: 1, drawing: 'auto' });
    expect(wholeFilter(view)).toBe('');
  });

  it('comes back the same from the address it makes', () => {
    const address =
      'where=Mt+%3C+172&only=surviving&only=vacuumClass+%3D%3D+1&quantity=Mh&from=120&to=&quantity=margin(vacuum-stability)' +
      '&from=-1&to=2e3&xFrom=150&xTo=2e2&x=Mt&y=margin(vacuum-stability)&yScale=log&colour=&drawing=cells&column=Mh&page=3';
    const first = read(address);
    expect(first.mistakes).toEqual([]);
    expect(read(viewQuery(first.view))).toEqual(first);
  });

  it('joins all conditions into one expression of the filter language', () => {
    const { view } = read(
      'where=Mt<170+or+Mt>175&only=violated(vacuum-stability)&quantity=Mh&from=120&to=130',
    );
    expect(wholeFilter(view)).toBe(
      '(violated(vacuum-stability)) and (120 <= Mh <= 130) and (Mt<170 or Mt>175)',
    );
    expect(() => compile(wholeFilter(view))).not.toThrow();
  });

  it('offers the parts of a plan, strata that vary the same inputs together, the largest first', () => {
    expect(offered[0].conditions).toEqual([
      { expression: 'stratum == 0 or stratum == 2', title: 'of plane, plane+1' },
      { expression: 'stratum == 1', title: 'of line' },
    ]);
    const alone = conditionsOf({ plan: JSON.stringify({ strata: strata.slice(0, 1) }) }, columns);
    expect(alone).toEqual(offered.slice(1));
  });

  it('offers conditions that the filter language reads', () => {
    const conditions = offered.flatMap((group) => group.conditions);
    expect(conditions.map((one) => one.expression)).toContain('met(vacuum-stability)');
    for (const { expression } of conditions) expect(() => compile(expression)).not.toThrow();
  });

  it.each([
    ['x=Mz', 'x', '“Mz”'],
    ['colour=nothing', 'colour', '“nothing”'],
    ['xScale=cubic', 'xScale', '“cubic”'],
    ['only=1+%3D%3D+1', 'only', '“1 == 1”'],
    ['quantity=Mh&from=a&to=', 'ranges', '“a”'],
    ['quantity=&from=1&to=', 'ranges', 'nothing'],
    ['column=zzz', 'columns', '“zzz”'],
    ['xFrom=3&xTo=1', 'xRange', '“3” and “1”'],
    ['yFrom=3', 'yRange', '“3” and nothing'],
    ['wher=Mt', 'address', '“wher”'],
    ['page=-1', 'page', '“-1”'],
    ['page=1e9', 'page', '“1e9”'],
  ])('says what is wrong in %s, and shows the usual view', (query, field, found) => {
    const { view, mistakes } = read(query);
    expect(mistakes).toHaveLength(1);
    expect(mistakes[0]).toMatchObject({ field, found });
    expect(mistakes[0].expected).not.toBe('');
    expect(view).toMatchObject({ x: 'Mh', y: 'Mt', page: 1, only: [] });
  });

  it('repeats no long text of an odd address', () => {
    const { mistakes } = read(`x=${'a'.repeat(5000)}`);
    expect(mistakes[0].found.length).toBeLessThan(80);
  });
});
