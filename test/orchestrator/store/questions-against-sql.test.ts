import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { askedBesideSql } from './asked-beside-sql.js';

const asked = askedBesideSql();

interface Pair {
  readonly filter: string;
  readonly sql: string;
}

/** Filters with their translation. SQL has three truth values; in our filters a comparison with an absent value is
 *  false, hence the COALESCE. */
const comparison: fc.Arbitrary<Pair> = fc
  .tuple(
    fc.constantFrom(
      'Mt',
      'Mh',
      'lambdaMin',
      'ratio',
      'vacuumClass',
      'index',
      'stratum',
      'margin(perturbativity)',
    ),
    fc.constantFrom('<', '<=', '>', '>=', '==', '!='),
    fc.constantFrom('0', '0.002', '-0.01', '1', '1.35', '125.25', '170.5', '1e3'),
  )
  .map(([name, operator, value]) => ({
    filter: `${name} ${operator} ${value}`,
    sql: `COALESCE("${name}" ${operator} ${value}, 0)`,
  }));
const word: fc.Arbitrary<Pair> = fc.constantFrom(
  { filter: 'surviving', sql: '(verdict = 0)' },
  { filter: 'excluded', sql: '(verdict = 1)' },
  { filter: 'failed', sql: '(verdict = 2)' },
  { filter: 'unfinished', sql: '(verdict = 3)' },
  { filter: 'met(vacuum-stability)', sql: '("outcome(vacuum-stability)" = 0)' },
  { filter: 'violated(perturbativity)', sql: '("outcome(perturbativity)" = 1)' },
  { filter: 'Mt / Mh > 1.36', sql: 'COALESCE(Mt / Mh > 1.36, 0)' },
  { filter: '166 < Mt < 172', sql: '(166 < Mt AND Mt < 172)' },
);
const { tree } = fc.letrec<{ tree: Pair }>((tie) => ({
  tree: fc.oneof(
    { maxDepth: 3 },
    comparison,
    word,
    fc.tuple(tie('tree'), fc.constantFrom('and', 'or'), tie('tree')).map(([a, op, b]) => ({
      filter: `(${a.filter}) ${op} (${b.filter})`,
      sql: `(${a.sql} ${op} ${b.sql})`,
    })),
    tie('tree').map((a) => ({ filter: `not (${a.filter})`, sql: `(NOT ${a.sql})` })),
  ),
}));

describe('answers agree with SQL on a plain table', () => {
  it('counts', () => {
    fc.assert(
      fc.property(tree, (pair) => {
        const rows = asked.sql
          .prepare<[], { verdict: number; n: number }>(
            `SELECT verdict, COUNT(*) AS n FROM points WHERE ${pair.sql} GROUP BY verdict`,
          )
          .all();
        const of = (verdict: number) => rows.find((row) => row.verdict === verdict)?.n ?? 0;
        expect(asked.ask.counts({ run: asked.run, where: pair.filter })).toEqual({
          total: 5700,
          points: rows.reduce((sum, row) => sum + row.n, 0),
          surviving: of(0),
          excluded: of(1),
          failed: of(2),
          unfinished: of(3),
        });
      }),
      { numRuns: 150, seed: 1 },
    );
  });

  it('pages', () => {
    fc.assert(
      fc.property(
        tree,
        fc.integer({ min: 0, max: 3000 }),
        fc.integer({ min: 1, max: 60 }),
        (pair, offset, limit) => {
          const page = asked.ask.page(
            { run: asked.run, where: pair.filter },
            ['Mt', 'lambdaMin', 'verdict'],
            offset,
            limit,
          );
          const rows = asked.sql
            .prepare<[number, number], (number | null)[]>(
              `SELECT stratum, "index", Mt, lambdaMin, verdict FROM points WHERE ${pair.sql}
             ORDER BY stratum, "index" LIMIT ? OFFSET ?`,
            )
            .raw()
            .all(limit, offset);
          const plain = page.rows.map((row) => [
            row.stratum,
            row.index,
            // SQLite keeps neither NaN nor the sign of zero.
            ...row.values.map((value) => (Number.isNaN(value) ? null : value + 0)),
          ]);
          expect(plain).toEqual(rows.map((row) => row.map((value) => value && value + 0)));
          expect(page.total).toBe(
            asked.sql.prepare(`SELECT COUNT(*) FROM points WHERE ${pair.sql}`).pluck().get(),
          );
          expect(page.columns.map((column) => column.name)).toEqual(['Mt', 'lambdaMin', 'verdict']);
        },
      ),
      { numRuns: 60, seed: 2 },
    );
  });

  it('density grids with counts, means, classes and undrawn points', () => {
    fc.assert(
      fc.property(tree, fc.integer({ min: 1, max: 9 }), fc.integer({ min: 1, max: 9 }), (pair, nx, ny) => {
        // Bin edges at multiples of a power of two, so that SQL and JavaScript cannot differ by rounding.
        const x = { column: 'Mt', scale: 'linear', range: [164, 164 + nx * 1.5] } as const;
        const y = { column: 'lambdaMin', scale: 'linear', range: [-0.03125, -0.03125 + ny / 256] } as const;
        const view = { run: asked.run, where: pair.filter };
        const grid = asked.ask.density(view, x, y, 'Mh', [nx, ny]);
        const inside = `Mt >= 164 AND Mt <= 164 + ${nx * 1.5} AND lambdaMin >= -0.03125 AND lambdaMin <= -0.03125 + ${ny} / 256.0`;
        const rows = asked.sql
          .prepare<[], { cell: number; n: number; mean: number }>(
            `SELECT MIN(${nx - 1}, CAST((Mt - 164) / 1.5 AS INTEGER))
                    + ${nx} * MIN(${ny - 1}, CAST((lambdaMin + 0.03125) * 256 AS INTEGER)) AS cell,
                    COUNT(*) AS n, AVG(Mh) AS mean
             FROM points WHERE ${pair.sql} AND ${inside} GROUP BY cell`,
          )
          .all();
        const wanted = new Float64Array(nx * ny);
        const means = new Float64Array(nx * ny).fill(NaN);
        for (const row of rows) [wanted[row.cell], means[row.cell]] = [row.n, row.mean];
        expect(grid.counts).toEqual(wanted);
        grid.mean!.forEach((mean, cell) => {
          if (Number.isNaN(means[cell])) expect(mean).toBeNaN();
          else expect(mean).toBeCloseTo(means[cell], 10);
        });
        const drawn = rows.reduce((sum, row) => sum + row.n, 0);
        expect(grid.undrawn).toBe(asked.ask.counts(view).points - drawn);
        const classes = asked.ask.density(view, x, y, 'verdict', [nx, ny]).classes!;
        const sums = wanted.map((_, cell) =>
          classes.labels.reduce((sum, _label, v) => sum + classes.counts[v * nx * ny + cell], 0),
        );
        expect(sums).toEqual(wanted);
        const excluded = asked.sql
          .prepare(`SELECT COUNT(*) FROM points WHERE ${pair.sql} AND ${inside} AND verdict = 1`)
          .pluck()
          .get();
        expect(classes.counts.subarray(nx * ny, 2 * nx * ny).reduce((a, b) => a + b, 0)).toBe(excluded);
      }),
      { numRuns: 60, seed: 3 },
    );
  });

  it('cut-flow', () => {
    const outcome = (name: string) => `"outcome(${name})"`;
    const [p, v, m] = ['perturbativity', 'vacuum-stability', 'measured-top-mass'].map(outcome);
    const judged = 'verdict < 2';
    const count = (where: string) =>
      asked.sql.prepare(`SELECT COUNT(*) FROM points WHERE ${where}`).pluck().get();
    for (const [where, text] of [
      ['1', ''],
      ['Mt > 170', 'Mt > 170'],
    ]) {
      const row = (
        constraint: string,
        deciding: boolean,
        column: string,
        others: string,
        remaining: string,
      ) => ({
        constraint,
        deciding,
        violated: count(`${where} AND ${judged} AND ${column} = 1`),
        notApplicable: count(`${where} AND ${judged} AND ${column} = 2`),
        alone: count(`${where} AND ${judged} AND ${column} = 1 AND ${others}`),
        remaining: count(`${where} AND ${judged} AND ${remaining}`),
      });
      expect(asked.ask.cutFlow({ run: asked.run, where: text })).toEqual({
        points: count(where),
        failed: count(`${where} AND verdict = 2`),
        unfinished: count(`${where} AND verdict = 3`),
        rows: [
          row('perturbativity', true, p, `${v} <> 1`, `${p} <> 1`),
          row('vacuum-stability', true, v, `${p} <> 1`, `${p} <> 1 AND ${v} <> 1`),
          row('measured-top-mass', false, m, `${p} <> 1 AND ${v} <> 1`, `${p} <> 1 AND ${v} <> 1`),
        ],
      });
    }
  });

  it('slices go through every point that passes once, in order', () => {
    fc.assert(
      fc.property(tree, fc.integer({ min: 1, max: 3000 }), (pair, limit) => {
        const wanted = asked.sql
          .prepare<[], string>(
            `SELECT CAST(stratum AS INTEGER) || '.' || CAST("index" AS INTEGER) FROM points WHERE ${pair.sql} ORDER BY stratum, "index"`,
          )
          .pluck()
          .all();
        const got: string[] = [];
        let at: { stratum: number; index: number } | null = { stratum: 0, index: 0 };
        while (at !== null) {
          const slice = asked.ask.slice(
            { run: asked.run, where: pair.filter },
            ['stratum', 'index', 'Mt'],
            at,
            limit,
          );
          expect(slice.count).toBeLessThanOrEqual(limit);
          for (let i = 0; i < slice.count; i++) {
            got.push(`${slice.columns.get('stratum')![i]}.${slice.columns.get('index')![i]}`);
          }
          at = slice.next;
        }
        expect(got).toEqual(wanted);
      }),
      { numRuns: 40, seed: 4 },
    );
  });
});
