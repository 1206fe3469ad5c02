import Database from 'better-sqlite3';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll } from 'vitest';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { questionsOf } from '../../../orchestrator/store/questions.js';
import type { Questions } from '../../../orchestrator/store/reading.js';
import { chunksOf, exampleChunk, examplePlan, examplePoint, exampleRun } from './example.js';

/** A finished run, and an oracle for questions about it: SQLite itself, with a plain table `points` of a row a point,
 *  filled from what a worker said and not through our segments. Absent values are NULL there. */
export interface Asked {
  readonly run: number;
  readonly ask: Questions;
  readonly sql: Database.Database;
}

const POINTS = [5000, 700];

/** Called once at the top of a file of tests; ready when its tests run. */
export function askedBesideSql(): Asked {
  const asked = {} as { -readonly [K in keyof Asked]: Asked[K] };
  const folder = mkdtempSync(join(tmpdir(), 'trigpoint-store-'));
  const store = openForWriting(join(folder, 'store.sqlite'));
  beforeAll(() => {
    asked.run = store.createRun(exampleRun(examplePlan(POINTS)));
    const lost = exampleChunk({ stratum: 0, first: 4100, count: 1 }).inputs;
    store.recordUnfinished(asked.run, 0, 4100, lost, 'time-out');
    for (const span of chunksOf(examplePlan(POINTS), 900)) store.commit(asked.run, [exampleChunk(span)]);
    asked.ask = questionsOf(store);
    asked.sql = new Database(join(folder, 'oracle.sqlite'));
    fill(asked.sql);
  });
  afterAll(() => {
    asked.sql.close();
    store.close();
    rmSync(folder, { recursive: true });
  });
  return asked;
}

/** Point 0.4100, which no worker could do. */
export function unfinishedPoint(): Map<string, number> {
  const point = examplePoint(0, 4100);
  const kept = ['stratum', 'index', 'Mt', 'Mh', 'alphaS'];
  for (const name of point.keys()) {
    if (kept.includes(name)) continue;
    point.set(name, name === 'verdict' ? 3 : name === 'failure' ? 0 : name.startsWith('outcome') ? 2 : NaN);
  }
  return point;
}

function fill(sql: Database.Database): void {
  const names = [...examplePoint(0, 0).keys()];
  sql.exec(`CREATE TABLE points (${names.map((name) => `"${name}" REAL`).join(', ')})`);
  const insert = sql.prepare(`INSERT INTO points VALUES (${names.map(() => '?').join(', ')})`);
  const all = sql.transaction(() => {
    POINTS.forEach((count, stratum) => {
      for (let i = 0; i < count; i++) {
        const point = stratum === 0 && i === 4100 ? unfinishedPoint() : examplePoint(stratum, i);
        insert.run(names.map((name) => point.get(name)!));
      }
    });
  });
  all();
}
