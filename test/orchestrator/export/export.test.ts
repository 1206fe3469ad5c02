import Database from 'better-sqlite3';
import { asyncBufferFromFile, parquetMetadataAsync, parquetReadObjects } from 'hyparquet';
import { existsSync, readdirSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { describe, expect, it, onTestFinished } from 'vitest';
import { exportCsv } from '../../../orchestrator/export/csv.js';
import { exportParquet } from '../../../orchestrator/export/parquet.js';
import { provenanceDocument, provenanceFileOf } from '../../../orchestrator/export/provenance-document.js';
import { exportSqlite } from '../../../orchestrator/export/sqlite.js';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { startReader } from '../../../orchestrator/store/reader-thread.js';
import type { AsyncQuestions } from '../../../orchestrator/store/reading.js';
import { exampleColumns, examplePlan, examplePoint, exampleRun, fillRun, newFile } from '../store/example.js';
import { exampleChunk } from '../store/example.js';
import { parseCsv } from './parse-csv.js';

const POINTS = [5000, 700];
const labelled = new Map(
  [...exampleColumns(), { name: 'verdict', labels: ['surviving', 'excluded', 'failed', 'unfinished'] }].map(
    (column) => [column.name, column.labels],
  ),
);

function store(): { questions: AsyncQuestions; path: string } {
  const path = newFile();
  const writing = openForWriting(path);
  fillRun(writing, examplePlan(POINTS), 1000);
  writing.close();
  const questions = startReader(path);
  onTestFinished(() => questions.close());
  return { questions, path };
}

async function csv(questions: AsyncQuestions, where = '', columns: readonly string[] = []): Promise<string> {
  let text = '';
  for await (const piece of exportCsv(questions, { run: 1, where }, columns)) text += piece;
  return text;
}

function allPoints(): Map<string, number>[] {
  return POINTS.flatMap((count, s) => Array.from({ length: count }, (_, i) => examplePoint(s, i)));
}

describe('CSV', () => {
  it('gives back every bit of every number through a reader of RFC 4180', async () => {
    const { questions } = store();
    const [header, ...rows] = parseCsv(await csv(questions));
    expect(header.slice(0, 3)).toEqual(['stratum', 'index', 'verdict']);
    expect([...header].sort()).toEqual([...examplePoint(0, 0).keys()].sort());
    const points = allPoints();
    expect(rows).toHaveLength(points.length);
    const FAILURE = header.indexOf('failure');
    rows.forEach((row, r) => {
      row.forEach((cell, c) => {
        if (c === FAILURE) return;
        const value = points[r].get(header[c])!;
        const labels = labelled.get(header[c]);
        const wanted = labels ? (labels[value] ?? '') : value;
        const read = labels ? cell : numberFrom(cell);
        if (!Object.is(read, wanted)) expect([r, header[c], cell]).toEqual(wanted);
      });
    });
    expect(rows[7][FAILURE]).toMatch(/^not-finite: /);
  });

  it('has exactly the rows of the filter and the asked columns', async () => {
    const { questions } = store();
    const where = 'Mt > 172 and surviving';
    const [header, ...rows] = parseCsv(await csv(questions, where, ['Mt', 'outcome(vacuum-stability)']));
    expect(header).toEqual(['stratum', 'index', 'verdict', 'Mt', 'outcome(vacuum-stability)']);
    const wanted = allPoints().filter((point) => point.get('Mt')! > 172 && point.get('verdict') === 0);
    expect(rows.map((row) => `${row[0]}.${row[1]}`)).toEqual(
      wanted.map((point) => `${point.get('stratum')}.${point.get('index')}`),
    );
    expect(rows).toHaveLength((await questions.counts({ run: 1, where })).points);
  });

  it('ends lines with CR LF and has a header even without rows', async () => {
    const { questions } = store();
    expect(await csv(questions, 'Mt > 1000', ['Mt'])).toBe('stratum,index,verdict,Mt\r\n');
  });

  it('quotes what must be quoted and disarms what a spreadsheet would run', async () => {
    const path = newFile();
    const writing = openForWriting(path);
    const labels = ['=HYPERLINK("http://example.org")', '@one, two', 'plain\nnot'];
    const columns = exampleColumns().map((c) => (c.name === 'vacuumClass' ? { ...c, labels } : c));
    const run = writing.createRun(exampleRun(examplePlan([3, 1]), { columns }));
    const chunk = exampleChunk({ stratum: 0, first: 0, count: 3 });
    writing.commit(run, [chunk]);
    writing.close();
    const questions = startReader(path);
    const text = await csv(questions, '', ['vacuumClass']);
    await questions.close();
    expect(text).toBe(
      'stratum,index,verdict,vacuumClass\r\n' +
        '0,0,excluded,"\'=HYPERLINK(""http://example.org"")"\r\n' +
        '0,1,surviving,"\'@one, two"\r\n' +
        '0,2,surviving,"plain\nnot"\r\n',
    );
  });

  it('reports an unknown column and a filter that does not fit as the user’s mistake', async () => {
    const { questions } = store();
    await expect(csv(questions, '', ['Mtt'])).rejects.toMatchObject({ code: 'user-mistake', exit: 2 });
    await expect(csv(questions, 'Mtt > 3')).rejects.toMatchObject({
      code: 'user-mistake',
      message: 'filter, column 1: expected the name of a column of the run, found Mtt (did you mean Mt?)',
    });
  });
});

describe('a wide table', () => {
  it('can be asked with SQL', async () => {
    const { questions, path } = store();
    const file = join(dirname(path), 'wide.sqlite');
    expect(await exportSqlite(questions, { run: 1, where: '' }, [], file)).toBe(5700);
    const db = new Database(file, { readonly: true });
    onTestFinished(() => void db.close());
    const wanted = allPoints().filter((p) => p.get('verdict') === 0 && p.get('lambdaMin')! < 0.005);
    const sql = `SELECT COUNT(*) FROM points WHERE verdict = 'surviving' AND lambdaMin < 0.005`;
    expect(db.prepare(sql).pluck().get()).toBe(wanted.length);
    expect(db.prepare('SELECT COUNT(*) FROM points WHERE lambdaMin IS NULL').pluck().get()).toBe(
      allPoints().filter((p) => Number.isNaN(p.get('lambdaMin'))).length,
    );
    expect(db.prepare(`SELECT unit FROM columns WHERE name = 'Mt'`).pluck().get()).toBe('GeV');
    const document = JSON.parse(db.prepare('SELECT document FROM provenance').pluck().get() as string) as {
      'trigpoint:rows': number;
    };
    expect(document['trigpoint:rows']).toBe(5700);
  });

  it('does not replace a file, and leaves none behind when it fails', async () => {
    const { questions, path } = store();
    const file = join(dirname(path), 'wide.sqlite');
    const bad = exportSqlite(questions, { run: 1, where: 'nonsense > 1' }, [], file);
    await expect(bad).rejects.toMatchObject({ code: 'user-mistake' });
    expect(readdirSync(dirname(path)).filter((name) => name.startsWith('wide'))).toEqual([]);
    writeFileSync(file, 'mine');
    await expect(exportSqlite(questions, { run: 1, where: '' }, [], file)).rejects.toThrow(
      /does not exist yet/,
    );
    expect(existsSync(file)).toBe(true);
  });
});

describe('Parquet', () => {
  it('gives back every bit through another reader, with units and provenance in the metadata', async () => {
    const { questions, path } = store();
    const file = join(dirname(path), 'points.parquet');
    expect(await exportParquet(questions, { run: 1, where: '' }, [], file)).toBe(5700);
    const buffer = await asyncBufferFromFile(file);
    const rows = await parquetReadObjects({ file: buffer });
    const points = allPoints();
    expect(rows).toHaveLength(points.length);
    rows.forEach((row, r) => {
      for (const [name, value] of points[r]) {
        if (name === 'failure') continue;
        const labels = labelled.get(name);
        const wanted = labels ? (labels[value] ?? null) : Number.isNaN(value) ? null : value;
        const read: unknown = typeof row[name] === 'bigint' ? Number(row[name]) : row[name];
        if (!Object.is(read, wanted)) expect([r, name, read]).toEqual(wanted);
      }
    });
    const metadata = await parquetMetadataAsync(buffer);
    const entries = new Map(metadata.key_value_metadata?.map((entry) => [entry.key, entry.value]));
    expect(JSON.parse(entries.get('units')!)).toMatchObject({ Mt: 'GeV', lambdaMin: '1' });
    expect(JSON.parse(entries.get('provenance')!)).toMatchObject({
      url: 'points.parquet',
      'trigpoint:rows': 5700,
    });
  });

  it('can be without rows', async () => {
    const { questions, path } = store();
    const file = join(dirname(path), 'none.parquet');
    expect(await exportParquet(questions, { run: 1, where: 'Mt > 1000' }, ['Mt'], file)).toBe(0);
    const metadata = await parquetMetadataAsync(await asyncBufferFromFile(file));
    expect(metadata.schema.slice(1).map((column) => column.name)).toEqual([
      'stratum',
      'index',
      'verdict',
      'Mt',
    ]);
  });
});

describe('the provenance document', () => {
  it('says what the columns are and how the run came about', async () => {
    const { questions } = store();
    const run = (await questions.run(1))!;
    const columns = await questions.columns(1);
    const document = provenanceDocument({
      run,
      view: { run: 1, where: 'Mt > 170' },
      columns,
      file: '/somewhere/a.csv',
      rows: 3,
    });
    expect(document).toMatchObject({
      url: 'a.csv',
      'trigpoint:filter': 'Mt > 170',
      'prov:wasGeneratedBy': {
        'trigpoint:digest': run.digest,
        'prov:used': { 'trigpoint:plan': { seed: 'seed' } },
      },
    });
    expect(JSON.stringify(document)).not.toContain('somewhere');
    expect(provenanceFileOf('/somewhere/a.csv')).toBe('/somewhere/a.provenance.json');
  });
});

function numberFrom(cell: string): number {
  if (cell === '') return NaN;
  if (cell === 'INF') return Infinity;
  return cell === '-INF' ? -Infinity : Number(cell);
}
