import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import {
  copyFileSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  truncateSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import Database from 'better-sqlite3';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { openForReading } from '../../orchestrator/store/open.js';
import { noRedis, redisServer } from '../contracts/redis-server.js';
import { endPrograms, program, type Program } from './processes.js';

/** The built program as a user runs it, with a real scan: whatever happens to it or to its disk, a launch afterwards
 *  gives the digest of an undisturbed run, or refuses clearly with nothing lost. */

const CLI = fileURLToPath(new URL('../../dist/orchestrator/cli.js', import.meta.url));
const SCAN = `
model: sm
seed: faults
sample: { method: sobol, points: 6000 }
vary:
  Mt: { range: [165, 180], unit: GeV }
  Mh: { range: [115, 135], unit: GeV }
require: [perturbativity, vacuum-stability]
`;

/** Needs a mount of its own, which a plain user may make only in a namespace of its own. */
const noMounts = spawnSync('unshare', ['--map-root-user', '--mount', 'true']).status !== 0;
if (noMounts && process.env.TRIGPOINT_REQUIRE_ALL === '1') throw new Error('unshare may not mount here');
if (noMounts) console.log('launches on full and read-only disks: skipped, unshare may not mount here');

interface Facts {
  readonly state: string;
  readonly points: number;
  readonly digest: string | null;
}

let shared: string;
let finished: string;
let undisturbed: Facts;
let folder: string;
let store: string;

beforeAll(async () => {
  shared = mkdtempSync(join(tmpdir(), 'trigpoint-faults-'));
  writeFileSync(join(shared, 'scan.yaml'), SCAN);
  finished = join(shared, 'finished.sqlite');
  undisturbed = await facts(launch(finished));
  expect(undisturbed).toMatchObject({ state: 'complete', points: 6000 });
});
afterAll(() => rmSync(shared, { recursive: true, force: true }));
beforeEach(() => {
  folder = mkdtempSync(join(shared, 'test-'));
  store = join(folder, 'store.sqlite');
});
afterEach(endPrograms);

function launch(at: string, ...options: readonly string[]): Program {
  return program([CLI, 'launch', join(shared, 'scan.yaml'), '--store', at, '--json', ...options], {
    REDIS_URL: '',
  });
}
async function facts(run: Program): Promise<Facts> {
  const status = await run.exit;
  if (status !== 0) throw new Error(`the launch ended with ${status}: ${run.err()}`);
  return JSON.parse(run.out()) as Facts;
}
/** Starts a launch and waits until some points are committed; one worker, so that there is time to disturb it. */
async function launchUnderWay(): Promise<Program> {
  const run = launch(store, '--workers', '1');
  await run.says(/run 1, new/);
  const reading = openForReading(store);
  while (reading.run(1)?.counts.points === 0) await new Promise((resolve) => setTimeout(resolve, 10));
  reading.close();
  return run;
}
const sameAsUndisturbed = () => ({ state: 'complete', points: 6000, digest: undisturbed.digest });
const hashOf = (file: string) => createHash('sha256').update(readFileSync(file)).digest('hex');

describe('a launch', () => {
  test('stopped by Ctrl-C ends with 130 and is resumed', async () => {
    const first = await launchUnderWay();
    first.signal('SIGINT');
    expect(await first.exit).toBe(130);
    expect(await facts(launch(store))).toMatchObject(sameAsUndisturbed());
  });

  test('killed with kill -9 is resumed', async () => {
    const first = await launchUnderWay();
    first.signal('SIGKILL');
    expect(await first.exit).toBe('SIGKILL');
    expect(await facts(launch(store))).toMatchObject(sameAsUndisturbed());
  });

  test('on a store that another works on is refused with 3', async () => {
    const first = launch(store);
    await first.says(/run 1, new/);
    const second = launch(store);
    expect(await second.exit).toBe(3);
    expect(second.err()).toContain(`process ${first.pid} `);
    expect(second.err()).not.toMatch(/^\s+at /m);
    expect(await facts(first)).toMatchObject(sameAsUndisturbed());
  });

  test('of a finished run computes nothing', async () => {
    copyFileSync(finished, store);
    const again = await facts(launch(store));
    expect(again).toMatchObject({ ...sameAsUndisturbed(), how: 'finished' });
  });

  test.skipIf(noRedis)('over a fleet of worker processes gives the same digest', async () => {
    const server = await redisServer({ appendOnly: false });
    try {
      const worker = program([CLI, 'worker', '--redis', server.url, '--workers', '2']);
      await worker.says(/takes chunks/);
      expect(await facts(launch(store, '--redis', server.url))).toMatchObject(sameAsUndisturbed());
      worker.signal('SIGINT');
      expect(await worker.exit).toBe(0);
    } finally {
      await server.stop();
    }
  });
});

describe('a store', () => {
  test.each([
    ['cut in half', (file: string) => truncateSync(file, Math.floor(readFileSync(file).length / 2))],
    ['cut in the middle of a page', (file: string) => truncateSync(file, readFileSync(file).length - 1234)],
    ['that is no store at all', (file: string) => writeFileSync(file, 'a shopping list\n'.repeat(400))],
    ['of a newer format', (file: string) => setFormat(file, 999)],
  ])('%s is refused with 3 and left as it is', async (_, damage) => {
    copyFileSync(finished, store);
    damage(store);
    const before = hashOf(store);
    const refused = launch(store);
    expect(await refused.exit).toBe(3);
    expect(refused.err()).toContain(store);
    expect(refused.err()).not.toMatch(/^\s+at /m);
    expect(hashOf(store)).toBe(before);
  });
});

describe.skipIf(noMounts)('a disk (skipped where unshare may not mount)', () => {
  test('that is full stops the launch with 3; with space again it is resumed', () => {
    const [first, second] = onMount(
      'mount -t tmpfs -o size=500k tmpfs "$DISK"',
      'mount -o remount,size=64m "$DISK"',
    );
    expect(first.status).toBe(3);
    expect(JSON.parse(first.out)).toMatchObject({ error: { code: 'disk-full' } });
    expect(first.err).toContain('the disk is full');
    expect(second.status).toBe(0);
    expect(JSON.parse(second.out)).toMatchObject(sameAsUndisturbed());
  });

  test('that is read-only refuses a new run with 3, and shows a finished one', () => {
    copyFileSync(finished, store);
    const disk = 'mount --bind "$DISK" "$DISK" && mount -o remount,ro,bind "$DISK"';
    const [refused, shown] = onMount(disk, `node "$CLI" show 1 --json --store "$DISK/store.sqlite"; exit`);
    expect(refused.status).toBe(3);
    expect(refused.err).toContain(store);
    expect(shown.status).toBe(0);
    expect(JSON.parse(shown.out)).toMatchObject(sameAsUndisturbed());
  });
});

/** Launches on a mount of its own that nobody else sees, before and after something happens to it. Where `between`
 *  exits, the second outcome is its own. */
function onMount(mount: string, between: string): { status: number; out: string; err: string }[] {
  const logs = join(shared, `logs-${Date.now()}`);
  mkdirSync(logs);
  const run = (n: number, what: string) =>
    `( ${what} ) >"$LOGS/out${n}" 2>"$LOGS/err${n}"; echo $? >"$LOGS/status${n}"`;
  const again = 'node "$CLI" launch "$SCAN" --store "$DISK/store.sqlite" --workers 2 --json';
  const script = [`${mount} || exit 9`, run(1, again), run(2, `${between}; ${again}`)].join('\n');
  const env = {
    DISK: folder,
    LOGS: logs,
    CLI,
    SCAN: join(shared, 'scan.yaml'),
    PATH: process.env.PATH,
    REDIS_URL: '',
  };
  const child = spawnSync('unshare', ['--map-root-user', '--mount', 'sh', '-c', script], { env });
  if (child.status !== 0) throw new Error(child.stderr.toString());
  const read = (name: string) => readFileSync(join(logs, name), 'utf8');
  return [1, 2].map((n) => ({
    status: Number(read(`status${n}`)),
    out: read(`out${n}`),
    err: read(`err${n}`),
  }));
}

function setFormat(file: string, format: number): void {
  const db = new Database(file);
  db.pragma(`user_version = ${format}`);
  db.close();
}
