import { randomUUID } from 'node:crypto';
import { hostname } from 'node:os';
import { Broken } from '../mistakes.js';
import type { Connection } from './connect.js';

/** Without a beat for this long, a coordinator is taken for dead, in milliseconds. */
const STALE_AFTER = 15_000;

/** The right to write to a store: one coordinator at a time. */
export interface Lease {
  /** Inside a write transaction: throws unless the lease is still ours, and marks it alive. */
  check(): void;
  /** Inside a write transaction. */
  release(): void;
}

interface Holder {
  readonly owner: string;
  readonly pid: number;
  readonly host: string;
  readonly beat: number;
}

/** Takes the lease of a store.
 *  @throws Broken 'store-in-use' while another coordinator is alive */
export function takeLease(path: string, db: Connection): Lease {
  const us = { owner: randomUUID(), pid: process.pid, host: hostname() };
  const read = db.prepare<[], Holder>('SELECT owner, pid, host, beat FROM lease WHERE id = 1');
  const write = db.prepare(
    'INSERT OR REPLACE INTO lease (id, owner, pid, host, beat) VALUES (1, @owner, @pid, @host, @beat)',
  );
  const beat = db.prepare('UPDATE lease SET beat = ? WHERE id = 1 AND owner = ?');
  const remove = db.prepare('DELETE FROM lease WHERE id = 1 AND owner = ?');
  const take = db.transaction(() => {
    const holder = read.get();
    if (holder !== undefined && isAlive(holder)) throw inUse(path, holder);
    write.run({ ...us, beat: Date.now() });
  });
  take.immediate();
  ownersHere.add(us.owner);
  return {
    check() {
      if (beat.run(Date.now(), us.owner).changes === 1) return;
      const holder = read.get();
      throw new Broken(
        'lease-lost',
        `${path}: ${holder ? described(holder) : 'another coordinator'} took the store over, because this one gave no sign of life for ${STALE_AFTER / 1000} s. Everything committed before is kept`,
      );
    },
    release() {
      ownersHere.delete(us.owner);
      remove.run(us.owner);
    },
  };
}

/** Whether a coordinator holds the store and gives signs of life. */
export function hasLiveCoordinator(db: Connection): boolean {
  const holder = db.prepare<[], Holder>('SELECT owner, pid, host, beat FROM lease WHERE id = 1').get();
  return holder !== undefined && isAlive(holder);
}

/** Owners that live in this process: a lease with our process id and another owner is a dead one's. */
const ownersHere = new Set<string>();

function isAlive(holder: Holder): boolean {
  // A clock set back must not keep a dead lease alive for long: a beat from the future counts by its distance.
  if (Math.abs(Date.now() - holder.beat) > STALE_AFTER) return false;
  if (holder.host !== hostname()) return true;
  if (holder.pid === process.pid) return ownersHere.has(holder.owner);
  return processExists(holder.pid);
}

function processExists(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    // EPERM: it exists but belongs to somebody else.
    return (error as NodeJS.ErrnoException).code === 'EPERM';
  }
}

function inUse(path: string, holder: Holder): Broken {
  return new Broken(
    'store-in-use',
    `${path}: ${described(holder)} is working on this store. Wait until it is done, stop it, or name another store with --store. Nothing was changed`,
  );
}

function described(holder: Holder): string {
  return `process ${holder.pid} on ${holder.host}`;
}
