import { describe, expect, it } from 'vitest';
import { askedBesideSql, unfinishedPoint } from './asked-beside-sql.js';
import { exampleColumns, examplePoint } from './example.js';

const asked = askedBesideSql();

describe('density axes', () => {
  const linear = (column: string) => ({ column, scale: 'linear', range: null }) as const;

  it('take the range of the points that can be drawn', () => {
    const where = 'Mt > 170 and lambdaMin > -1 and lambdaMin < 1';
    const [low, high] = asked.sql
      .prepare<[], number[]>('SELECT MIN(Mt), MAX(Mt) FROM points WHERE Mt > 170 AND ABS(lambdaMin) < 1')
      .raw()
      .get()!;
    const grid = asked.ask.density(
      { run: asked.run, where },
      linear('Mt'),
      linear('lambdaMin'),
      null,
      [5, 5],
    );
    expect([grid.x.low, grid.x.high]).toEqual([low, high]);
    expect(grid.undrawn).toBe(0);
    expect(grid.mean).toBeUndefined();
  });

  it('leave infinities, and on logarithmic scales what is not positive, undrawn', () => {
    const all = { run: asked.run, where: '' };
    const log = { column: 'lambdaMin', scale: 'log', range: null } as const;
    const grid = asked.ask.density(all, linear('Mt'), log, null, [3, 3]);
    const positive = asked.sql
      .prepare('SELECT COUNT(*) FROM points WHERE lambdaMin > 0 AND lambdaMin < 9e999')
      .pluck()
      .get();
    expect(grid.counts.reduce((a, b) => a + b, 0)).toBe(positive);
    expect(grid.undrawn).toBe(5700 - Number(positive));
    expect(grid.y.low).toBe(5e-324);
  });

  it('get some width where all points share a value, and a plain range where there are none', () => {
    const one = asked.ask.density(
      { run: asked.run, where: 'stratum == 0' },
      linear('Mh'),
      linear('alphaS'),
      null,
      [2, 2],
    );
    expect([one.x.low, one.x.high]).toEqual([125.25 / 2, 125.25 * 1.5]);
    expect(one.counts.reduce((a, b) => a + b, 0)).toBe(5000);
    const none = asked.ask.density(
      { run: asked.run, where: 'Mt > 1000' },
      linear('Mt'),
      { ...linear('Mh'), scale: 'log' },
      null,
      [2, 2],
    );
    expect([none.x.low, none.x.high, none.y.low, none.y.high]).toEqual([0, 1, 1, 10]);
  });

  it.each([
    [[2, 1], 'linear', /lower and then a higher/],
    [[-1, 1], 'log', /positive numbers/],
    [[0, Infinity], 'linear', /finite/],
  ] as const)('refuse the range %j on a %s scale', (range, scale, message) => {
    expect(() =>
      asked.ask.density(
        { run: asked.run, where: '' },
        { column: 'Mt', scale, range },
        linear('Mh'),
        null,
        [2, 2],
      ),
    ).toThrow(message);
  });
});

describe('scatter plots', () => {
  it('take points evenly by order, all of them where there are few', () => {
    const view = { run: asked.run, where: 'stratum == 1 and index < 600' };
    const all = asked.ask.scatter(view, 'Mt', 'Mh', 'verdict', 1000);
    expect([all.total, all.x.length]).toEqual([600, 600]);
    const some = asked.ask.scatter(view, 'Mt', 'Mh', null, 100);
    expect([some.total, some.x.length, some.colour]).toEqual([600, 100, null]);
    expect([...some.index]).toEqual(Array.from({ length: 100 }, (_, i) => 6 * i));
    some.index.forEach((index, i) => {
      const point = examplePoint(1, index);
      expect([some.x[i], some.y[i], some.stratum[i]]).toEqual([point.get('Mt'), point.get('Mh'), 1]);
    });
  });

  it('leave absent and infinite values out', () => {
    const finite = asked.sql
      .prepare('SELECT COUNT(*) FROM points WHERE ABS(lambdaMin) < 9e999')
      .pluck()
      .get();
    const plot = asked.ask.scatter({ run: asked.run, where: '' }, 'Mt', 'lambdaMin', null, 7);
    expect([plot.total, plot.x.length]).toEqual([finite, 7]);
    expect([...plot.y].every(Number.isFinite)).toBe(true);
  });
});

describe('one point', () => {
  it('has every column', () => {
    expect(asked.ask.point(asked.run, 1, 699)).toEqual(examplePoint(1, 699));
    expect(asked.ask.point(asked.run, 0, 4100)).toEqual(unfinishedPoint());
    expect([...asked.ask.point(asked.run, 0, 0)!.keys()]).toHaveLength(4 + exampleColumns().length);
  });

  it('is undefined where nothing is committed', () => {
    expect(asked.ask.point(asked.run, 1, 700)).toBeUndefined();
    expect(asked.ask.point(asked.run, 0, 5000)).toBeUndefined();
    expect(asked.ask.point(asked.run, 7, 0)).toBeUndefined();
  });
});

describe('what a run does not understand', () => {
  it.each([
    ['Mtt > 1', 'filter, column 1: expected the name of a column of the run, found Mtt (did you mean Mt?)'],
    [
      'Mt > 1 and margin(perturbativty) > 0',
      'filter, column 12: expected the name of a column of the run, found margin(perturbativty) (did you mean margin(perturbativity)?)',
    ],
  ])('%s', (where, message) => {
    expect(() => asked.ask.counts({ run: asked.run, where })).toThrow(
      expect.objectContaining({ code: 'user-mistake', exit: 2, message }),
    );
  });

  it('says where a filter stops making sense', () => {
    expect(() => asked.ask.counts({ run: asked.run, where: 'Mt > > 1' })).toThrow(
      /^filter, column 6: expected .*, found/,
    );
  });

  it('names a run and columns that do not exist', () => {
    expect(() => asked.ask.counts({ run: 99, where: '' })).toThrow(
      expect.objectContaining({ code: 'no-such-run' }),
    );
    expect(() => asked.ask.page({ run: asked.run, where: '' }, ['lamdaMin'], 0, 1)).toThrow(
      /did you mean lambdaMin/,
    );
    expect(() => asked.ask.scatter({ run: asked.run, where: '' }, 'Mt', 'nothing', null, 5)).toThrow(
      /found nothing/,
    );
  });
});
