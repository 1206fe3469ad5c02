import { copyFileSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openForReading, openForWriting } from '../../../orchestrator/store/open.js';
import { questionsOf } from '../../../orchestrator/store/questions.js';
import type { Writing } from '../../../orchestrator/store/writing.js';
import { chunksOf, exampleChunk, examplePlan, exampleRun, fillRun, newFile } from './example.js';
import { noMounts, smallDisk } from './mounted.js';

if (noMounts !== undefined) console.log(`full and read-only disks: skipped, ${noMounts}`);

/** Commits until the disk is full; returns how many points were acknowledged. */
function commitUntilFull(store: Writing, run: number, size: number): number {
  let acknowledged = 0;
  expect(() => {
    for (const span of chunksOf(examplePlan([200_000]), size)) {
      acknowledged = store.commit(run, [exampleChunk(span)]).points;
    }
  }).toThrow(
    expect.objectContaining({
      code: 'disk-full',
      exit: 3,
      message: expect.stringMatching(/free some space/) as string,
    }),
  );
  return acknowledged;
}

const plan = examplePlan([200_000]);
// One varied input less than in the example of two strata.
const committed = (store: Writing, run: number) =>
  store.committed(run).reduce((sum, span) => sum + span.count, 0);

describe.skipIf(noMounts !== undefined)('a full disk', () => {
  it.each([500, 4096])(
    'loses nothing that was acknowledged, and goes on once there is room (%i points a chunk)',
    (size) => {
      const disk = smallDisk('6m');
      const path = join(disk.path, 'store.sqlite');
      const ballast = join(disk.path, 'ballast');
      const store = openForWriting(path);
      writeFileSync(ballast, Buffer.alloc(3_500_000));
      const run = store.createRun(exampleRun(bothVaried(plan)));
      const acknowledged = commitUntilFull(store, run, size);
      expect(acknowledged).toBeGreaterThan(0);
      expect(committed(store, run)).toBe(acknowledged);
      expect(store.run(run)!.counts.points).toBe(acknowledged);
      rmSync(ballast);
      const next = exampleChunk({ stratum: 0, first: acknowledged, count: 100 });
      expect(store.commit(run, [next]).points).toBe(acknowledged + 100);
      store.verifyIntegrity(run);
      store.close();
    },
  );

  it('leaves a store that can be read and closed while it is still full, and written later', () => {
    const disk = smallDisk('6m');
    const path = join(disk.path, 'store.sqlite');
    const ballast = join(disk.path, 'ballast');
    writeFileSync(ballast, Buffer.alloc(3_500_000));
    const store = openForWriting(path);
    const run = store.createRun(exampleRun(bothVaried(plan)));
    const acknowledged = commitUntilFull(store, run, 1000);
    writeFileSync(join(disk.path, 'rest'), fillRest(disk.path));
    store.close();
    rmSync(ballast);
    const again = openForWriting(path);
    expect(committed(again, run)).toBe(acknowledged);
    expect(again.commit(run, [exampleChunk({ stratum: 0, first: acknowledged, count: 10 })]).points).toBe(
      acknowledged + 10,
    );
    again.close();
  });
});

describe.skipIf(noMounts !== undefined)('a read-only disk', () => {
  it('lets a finished store be read, and refuses to write', () => {
    const disk = smallDisk('4m');
    const path = join(disk.path, 'store.sqlite');
    const store = openForWriting(path);
    const { run, digest } = fillRun(store);
    store.close();
    disk.makeReadOnly();
    const reading = openForReading(path);
    expect(reading.run(run)?.digest).toBe(digest);
    expect(questionsOf(reading).counts({ run, where: 'Mt > 0' }).points).toBe(5700);
    reading.verifyIntegrity(run);
    reading.close();
    expect(() => openForWriting(path)).toThrow(
      expect.objectContaining({
        code: 'store-read-only',
        message: expect.stringMatching(/copy it to a place/) as string,
      }),
    );
    expect(readdirSync(disk.path)).toEqual(['store.sqlite']);
  });

  it('lets a store be read whose last reader outlived its writer', () => {
    const disk = smallDisk('4m');
    const path = join(disk.path, 'store.sqlite');
    const store = openForWriting(path);
    const { run } = fillRun(store);
    const last = openForReading(path);
    last.runs();
    store.close();
    last.close();
    disk.makeReadOnly();
    expect(openForReading(path).run(run)?.state).toBe('complete');
  });

  it('says what to do with a store that was not closed cleanly', () => {
    const source = newFile();
    const store = openForWriting(source);
    const { digest } = fillRun(store);
    const disk = smallDisk('8m');
    const path = join(disk.path, 'store.sqlite');
    for (const ending of ['', '-wal']) copyFileSync(`${source}${ending}`, `${path}${ending}`);
    store.close();
    disk.makeReadOnly();
    const before = readFileSync(path);
    for (const open of [openForReading, openForWriting]) {
      expect(() => open(path)).toThrow(
        expect.objectContaining({
          exit: 3,
          message: expect.stringMatching(/Nothing was changed: copy it/) as string,
        }),
      );
    }
    expect(readFileSync(path).equals(before)).toBe(true);
    // Doing what the message says works.
    const copy = newFile();
    for (const ending of ['', '-wal']) copyFileSync(`${path}${ending}`, `${copy}${ending}`);
    const reading = openForReading(copy);
    expect(reading.run(1)?.digest).toBe(digest);
    reading.close();
  });
});

/** The example chunks bring two inputs: a plan of one stratum that varies both. */
function bothVaried(one: ReturnType<typeof examplePlan>): ReturnType<typeof examplePlan> {
  const [, both] = examplePlan([1, 1]).strata;
  return { ...one, strata: [{ ...one.strata[0], vary: both.vary }] };
}

/** As many bytes as are still free, found by halving. */
function fillRest(folder: string): Buffer {
  let size = 4_000_000;
  for (; size > 4096; size = Math.floor(size * 0.9)) {
    try {
      writeFileSync(join(folder, 'probe'), Buffer.alloc(size));
      break;
    } catch {
      // Too much: less is tried.
    } finally {
      rmSync(join(folder, 'probe'), { force: true });
    }
  }
  return Buffer.alloc(size > 4096 ? size : 0);
}
