import Database from 'better-sqlite3';
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync, truncateSync, writeFileSync } from 'node:fs';
import { hostname } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { packageRoot } from '../../../orchestrator/provenance/package-root.js';
import { openForReading, openForWriting } from '../../../orchestrator/store/open.js';
import { FORMAT } from '../../../orchestrator/store/schema.js';
import { exampleChunk, exampleRun, fillRun, folder, newFile } from './example.js';

/** A finished store, closed. */
function finished(): string {
  const path = newFile();
  const store = openForWriting(path);
  fillRun(store);
  store.close();
  return path;
}

function change(path: string, sql: string): void {
  const db = new Database(path);
  db.exec(sql);
  db.close();
}

function expectRefused(path: string, code: string, message: RegExp): void {
  const before = readFileSync(path);
  for (const open of [openForWriting, openForReading]) {
    expect(() => open(path)).toThrow(
      expect.objectContaining({ code, exit: 3, message: expect.stringMatching(message) as string }),
    );
  }
  expect(readFileSync(path).equals(before)).toBe(true);
}

describe('opening a file that is no sound store is refused, and changes nothing', () => {
  it('not a database', () => {
    const path = join(folder(), 'notes.txt');
    writeFileSync(path, 'Dear diary, '.repeat(1000));
    expectRefused(path, 'not-a-store', /not a Trigpoint store\. Nothing was changed/);
  });

  it('a database of another program', () => {
    const path = newFile();
    change(path, 'CREATE TABLE songs (title TEXT)');
    expectRefused(path, 'not-a-store', /database of another program/);
  });

  it('a newer format', () => {
    const path = finished();
    change(path, `PRAGMA user_version = ${FORMAT + 1}`);
    expectRefused(path, 'newer-format', new RegExp(`format ${FORMAT + 1}.*knows up to ${FORMAT}`));
  });

  it.each([0.9, 0.5, 0.01])('cut off at %f of its length', (part) => {
    const path = finished();
    truncateSync(path, Math.floor(readFileSync(path).length * part));
    expectRefused(path, 'store-truncated', /cut off: its header promises \d+ bytes, it has \d+/);
  });

  it('damaged in a small table', () => {
    const path = finished();
    const bytes = readFileSync(path);
    // Page 2 is the root of the first table made.
    for (const page of [1, 2, 3, 4, 5, 6]) bytes.fill(0x5a, page * 4096 + 100, page * 4096 + 4000);
    writeFileSync(path, bytes);
    expectRefused(path, 'store-corrupt', /damaged/);
  });

  it('a folder', () => {
    expect(() => openForWriting(folder())).toThrow(expect.objectContaining({ code: 'not-a-store' }));
  });

  it('in a folder that does not exist', () => {
    const path = join(folder(), 'nowhere', 'store.sqlite');
    expect(() => openForWriting(path)).toThrow(
      expect.objectContaining({ code: 'store-cannot-open', exit: 3 }),
    );
  });

  it('nothing to read', () => {
    const path = newFile();
    expect(() => openForReading(path)).toThrow(expect.objectContaining({ code: 'no-store' }));
    expect(existsSync(path)).toBe(false);
  });
});

describe('the integrity of a run', () => {
  it('is found broken where a byte of a column changed', () => {
    const path = finished();
    const db = new Database(path);
    const column = `SELECT segment, data FROM segment_columns WHERE name = 'ratio'`;
    const { segment, data } = db.prepare<[], { segment: number; data: Buffer }>(column).get()!;
    data[1001] ^= 1;
    db.prepare(`UPDATE segment_columns SET data = ? WHERE name = 'ratio' AND segment = ?`).run(data, segment);
    db.close();
    const reading = openForReading(path);
    expect(() => reading.verifyIntegrity(1)).toThrow(
      /column ratio of points \d+ to \d+ of stratum \d has changed/,
    );
    reading.close();
  });

  it('is found broken where hashes fit but the digest does not', () => {
    const path = finished();
    change(path, `UPDATE runs SET digest = 'sha256:other'`);
    const reading = openForReading(path);
    expect(() => reading.verifyIntegrity(1)).toThrow(/does not have the digest that was recorded/);
    reading.close();
  });

  it('is sound otherwise, and says how much was read', () => {
    const reading = openForReading(finished());
    // Two blocks of one stratum and one of the other, of evaluations and judgements.
    expect(reading.verifyIntegrity(1)).toEqual({ segments: 6, bytes: 5700 * (5 * 8 + 1 + 3 * 17 + 1) });
    reading.close();
  });
});

describe('the lease', () => {
  it('lets one coordinator write, and names it to the other', () => {
    const path = newFile();
    const first = openForWriting(path);
    expect(() => openForWriting(path)).toThrow(
      expect.objectContaining({
        code: 'store-in-use',
        exit: 3,
        message: expect.stringContaining(`process ${process.pid} on ${hostname()}`) as string,
      }),
    );
    first.close();
    openForWriting(path).close();
  });

  it('lets anybody read meanwhile', () => {
    const path = newFile();
    const store = openForWriting(path);
    const run = store.createRun(exampleRun());
    const reading = openForReading(path);
    expect(reading.run(run)?.state).toBe('running');
    reading.close();
    store.close();
  });

  it.each([
    ['is old', `UPDATE lease SET beat = beat - 16000, host = 'elsewhere'`],
    ['is of a process that is gone', `UPDATE lease SET pid = 4194303`],
    ['is of an earlier life of this process id', `UPDATE lease SET owner = 'somebody'`],
  ])('is taken over when it %s, and the former holder writes no more', (_, sql) => {
    const path = newFile();
    const first = openForWriting(path);
    const run = first.createRun(exampleRun());
    change(path, sql);
    const second = openForWriting(path);
    const span = { stratum: 0, first: 0, count: 10 };
    for (const write of [
      () => first.commit(run, [exampleChunk(span)]),
      () => first.recordAttempt(run, span),
      () => first.beat(),
      () => first.setState(run, 'paused', 1),
    ]) {
      expect(write).toThrow(expect.objectContaining({ code: 'lease-lost', exit: 3 }));
    }
    expect(second.committed(run)).toEqual([]);
    second.commit(run, [exampleChunk(span)]);
    first.close();
    second.beat();
    second.close();
  });

  it('of another host that lives is respected', () => {
    const path = newFile();
    const first = openForWriting(path);
    change(path, `UPDATE lease SET host = 'elsewhere', pid = 4194303, beat = beat - 10000`);
    expect(() => openForWriting(path)).toThrow(/process 4194303 on elsewhere is working on this store/);
    first.close();
  });

  it('of a killed coordinator is taken over, and all it committed is there', async () => {
    const path = newFile();
    const store = join(packageRoot(), 'dist', 'orchestrator', 'store', 'open.js');
    const program = `
      const { openForWriting } = await import(${JSON.stringify(store)});
      const writing = openForWriting(${JSON.stringify(path)});
      const run = writing.createRun(${JSON.stringify(exampleRun())});
      for (let first = 0; ; first = (first + 10) % 5000) {
        const zeros = (n) => new Float64Array(n);
        const result = { count: 10, quantities: zeros(30), outcomes: new Uint8Array(30), margins: zeros(30),
          logLikelihoods: zeros(30), failures: new Uint8Array(10), verdicts: new Uint8Array(10) };
        writing.commit(run, [{ stratum: 0, first, count: 10, inputs: zeros(20), result, worker: 'w', milliseconds: 1 }]);
        process.stdout.write('.');
      }`;
    const child = spawn(process.execPath, ['--input-type=module', '-e', program], {
      stdio: ['ignore', 'pipe', 'inherit'],
    });
    let committed = 0;
    child.stdout.on('data', (text: Buffer) => {
      committed += text.length;
      if (committed >= 50) child.kill('SIGKILL');
    });
    await once(child, 'close');
    const after = openForWriting(path);
    expect(after.run(1)!.counts.points).toBeGreaterThanOrEqual(committed * 10);
    expect(after.committed(1)).toEqual([{ stratum: 0, first: 0, count: after.run(1)!.counts.points }]);
    expect(after.verifyIntegrity(1).segments).toBeGreaterThan(0);
    after.close();
  });
});

describe('a clean close', () => {
  it('leaves one file without a log, which opens again', () => {
    const path = finished();
    expect([existsSync(`${path}-wal`), existsSync(`${path}-shm`)]).toEqual([false, false]);
    expect(readFileSync(path)[18]).toBe(1);
    const store = openForWriting(path);
    expect(store.run(1)?.state).toBe('complete');
    store.close();
    store.close();
  });

  it('with readers still there loses nothing', () => {
    const path = newFile();
    const store = openForWriting(path);
    const { digest } = fillRun(store);
    const reading = openForReading(path);
    expect(reading.run(1)?.digest).toBe(digest);
    store.close();
    expect(reading.run(1)?.digest).toBe(digest);
    reading.close();
    openForWriting(path).close();
    expect(readFileSync(path)[18]).toBe(1);
  });
});
