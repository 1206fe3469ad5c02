/** A run of one million points with 40 quantities: stored, counted, binned and exported, against a plain table with a
 *  row a point and a column a quantity. Targets: 100,000 points/s stored; a count and a 100 x 100 histogram under a
 *  filter on any quantity below 200 ms. */
import Database from 'better-sqlite3';
import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { exportCsv } from '../../dist/orchestrator/export/csv.js';
import { openForReading, openForWriting } from '../../dist/orchestrator/store/open.js';
import { questionsOf } from '../../dist/orchestrator/store/questions.js';
import { startReader } from '../../dist/orchestrator/store/reader-thread.js';
import { best, report } from './timing.mjs';

const POINTS = Number(process.env.TRIGPOINT_BENCH_POINTS ?? 1e6);
const quantities = Array.from({ length: 40 }, (_, i) => `q${i}`);
const inputs = ['a', 'b', 'c'];
const constraint = 'made-up';
const folder = mkdtempSync(join(tmpdir(), 'trigpoint-bench-'));

/** A fixed sequence without pattern (multiplicative congruential, Park and Miller 1988), cut into chunks. */
let state = 1;
const noise = Float64Array.from(
  { length: 1 << 20 },
  () => (state = (state * 16807) % 2147483647) / 2147483647,
);
function chunk(first, count) {
  const from = (offset, length) => noise.subarray(offset % 500_000, (offset % 500_000) + length);
  const result = {
    count,
    quantities: from(first * 7, 40 * count),
    outcomes: new Uint8Array(count),
    margins: from(first * 3, count),
    logLikelihoods: from(first, count),
    failures: new Uint8Array(count),
    verdicts: new Uint8Array(count),
  };
  return {
    stratum: 0,
    first,
    count,
    inputs: from(first * 5, 3 * count),
    result,
    worker: 'w',
    milliseconds: 1,
  };
}

function newRun() {
  const column = (name, kind) => ({ name, kind, unit: '1', symbol: name, meaning: name });
  const axis = (input) => ({ input, kind: 'range', from: 0, to: 1, scale: 'linear' });
  const vary = inputs.map(axis);
  return {
    parent: null,
    relation: 'launch',
    plan: {
      title: 'bench',
      strata: [{ name: 's', method: 'uniform', generation: 0, points: POINTS, vary }],
      fix: {},
      require: [{ name: constraint, options: {} }],
      note: [],
      keep: quantities,
    },
    scanFile: { name: '', text: '' },
    fingerprints: {},
    environment: {},
    columns: [
      ...inputs.map((name) => column(name, 'input')),
      ...quantities.map((name) => column(name, 'quantity')),
      ...['outcome', 'margin', 'likelihood'].map((kind) => column(`${kind}(${constraint})`, kind)),
    ],
    wanted: POINTS,
  };
}

/** Stores all points in commits of `together` chunks of `size`; wall and processor time in milliseconds. */
function storeAll(file, size, together) {
  const store = openForWriting(join(folder, file));
  const run = store.createRun(newRun());
  return timed(() => {
    let chunks = [];
    for (let first = 0; first < POINTS; first += size) {
      chunks.push(chunk(first, Math.min(size, POINTS - first)));
      if (chunks.length < together && first + size < POINTS) continue;
      store.commit(run, chunks);
      chunks = [];
    }
    store.seal(run, 'complete', 1);
    store.close();
  });
}

function wideTable(file) {
  const db = new Database(join(folder, file));
  db.pragma('journal_mode = WAL');
  const names = [...inputs, ...quantities, 'margin', 'likelihood'];
  db.exec(
    `CREATE TABLE points (i INTEGER PRIMARY KEY, ${names.map((n) => `${n} REAL`).join(', ')}, outcome INT, failure INT, verdict INT)`,
  );
  const insert = db.prepare(
    `INSERT INTO points VALUES (${Array.from({ length: names.length + 4 }, () => '?').join(', ')})`,
  );
  const add = db.transaction(({ first, count, inputs: ins, result }) => {
    for (let p = 0; p < count; p++) {
      const row = [first + p];
      for (let c = 0; c < 3; c++) row.push(ins[c * count + p]);
      for (let c = 0; c < 40; c++) row.push(result.quantities[c * count + p]);
      row.push(result.margins[p], result.logLikelihoods[p], 0, 0, 0);
      insert.run(row);
    }
  });
  const time = timed(() => {
    for (let first = 0; first < POINTS; first += 4096) add(chunk(first, Math.min(4096, POINTS - first)));
    db.pragma('wal_checkpoint(TRUNCATE)');
  });
  return { db, time };
}

function timed(run) {
  const [wall, cpu] = [performance.now(), process.cpuUsage()];
  run();
  const used = process.cpuUsage(cpu);
  return { wall: performance.now() - wall, cpu: (used.user + used.system) / 1000 };
}

const rate = (ms) => `${Math.round(POINTS / ms)} k points/s`;
const size = (file) => `${Math.round(statSync(join(folder, file)).size / 1e6)} MB`;

try {
  const { db, time: reference } = wideTable('wide.sqlite');
  const table = `a plain table (${rate(reference.wall)}, ${size('wide.sqlite')})`;
  for (const [file, points, together] of [
    ['aligned.sqlite', 1024, 4],
    ['large.sqlite', 1024, 32],
    ['small.sqlite', 250, 8],
  ]) {
    const { wall, cpu } = storeAll(file, points, together);
    const what = `stored in chunks of ${points}, ${together} a commit: ${rate(wall)} (${rate(cpu)} of processor time), ${size(file)}`;
    report(what, wall, reference.wall, table);
  }

  const reading = openForReading(join(folder, 'aligned.sqlite'));
  const ask = questionsOf(reading);
  const axis = (column) => ({ column, scale: 'linear', range: null });
  const sqlCount = db.prepare('SELECT COUNT(*) FROM points WHERE q17 > 0.3');
  const sqlBins = db.prepare(
    'SELECT CAST(q3 * 100 AS INT) x, CAST(q5 * 100 AS INT) y, COUNT(*) FROM points WHERE q17 > 0.3 GROUP BY x, y',
  );
  const count = best(() => sqlCount.get(), 3);
  const bins = best(() => sqlBins.all(), 2);
  const view = { run: 1, where: 'q17 > 0.3' };
  const density = (where) => ask.density({ run: 1, where }, axis('q3'), axis('q5'), null, [100, 100]);
  report(
    'count under a filter, first time',
    best(() => ask.counts(view), 1),
    count,
    'the same in SQL',
  );
  report(
    'count under a filter, again',
    best(() => ask.counts(view)),
    count,
    'the same in SQL',
  );
  report(
    'histogram under a filter, first time',
    best(() => density('q17 > 0.3'), 1),
    bins,
    'the same in SQL',
  );
  report(
    'histogram under a filter, again',
    best(() => density('q17 > 0.3')),
    bins,
    'the same in SQL',
  );
  report(
    'histogram under another filter, first time',
    best(() => density('q23 * q24 > 0.3 and a < 0.9'), 1),
    bins,
    'one in SQL',
  );
  report(
    'page 10,000 of a filter',
    best(() => ask.page(view, quantities, 500_000, 50), 3),
    count,
    'a count in SQL',
  );
  report(
    'cut-flow',
    best(() => ask.cutFlow(view), 3),
    count,
    'a count in SQL',
  );
  report(
    'every byte read and its hash compared',
    best(() => reading.verifyIntegrity(1), 1),
    reference.wall,
    table,
  );
  reading.close();

  const questions = startReader(join(folder, 'aligned.sqlite'));
  let longest = 0;
  let last = performance.now();
  const timer = setInterval(() => {
    longest = Math.max(longest, performance.now() - last - 1);
    last = performance.now();
  }, 1);
  const start = performance.now();
  let bytes = 0;
  for await (const text of exportCsv(questions, { run: 1, where: 'q17 > 0.95' }, [])) bytes += text.length;
  clearInterval(timer);
  await questions.close();
  report(
    `${Math.round(bytes / 1e6)} MB of CSV, event loop blocked ${Math.round(longest)} ms at most`,
    performance.now() - start,
    reference.wall,
    table,
  );
  console.log(`${Math.round(process.memoryUsage().rss / 1e6)} MB resident at the end`);
  db.close();
} finally {
  rmSync(folder, { recursive: true, force: true });
}
