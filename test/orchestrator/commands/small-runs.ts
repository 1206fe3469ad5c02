import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import type { Progress } from '../../../orchestrator/commands/commands.js';
import { withReading } from '../../../orchestrator/commands/read-store.js';
import type { Start, Work } from '../../../orchestrator/commands/work.js';
import type { OpenDispatcher } from '../../../orchestrator/dispatch/dispatcher.js';
import { openThreads } from '../../../orchestrator/dispatch/threads.js';
import type { Reading } from '../../../orchestrator/store/reading.js';

/** Real runs of a second or less, on real threads and a store of their own. */

const folders: string[] = [];
afterAll(() => {
  for (const folder of folders.splice(0)) rmSync(folder, { recursive: true, force: true });
});

export function newStore(): string {
  const folder = mkdtempSync(join(tmpdir(), 'trigpoint-commands-'));
  folders.push(folder);
  return join(folder, 'trigpoint.sqlite');
}

export interface Observed extends Work {
  readonly starts: Start[];
  readonly progress: Progress[];
  /** Points handed to workers. */
  computed(): number;
}

/** Work that counts what is computed.
 *  @param stopAfter points after which the work is told to stop */
export function work(store: string, stopAfter = Infinity): Observed {
  const stop = new AbortController();
  const starts: Start[] = [];
  const progress: Progress[] = [];
  let computed = 0;
  const threads = openThreads(2);
  const open: OpenDispatcher = async (task, scope) => {
    const dispatcher = await threads(task, scope);
    return Object.assign(Object.create(dispatcher) as typeof dispatcher, {
      capacity: () => dispatcher.capacity(),
      submit(job: Parameters<typeof dispatcher.submit>[0]) {
        computed += job.points.count;
        if (computed >= stopAfter) stop.abort();
        dispatcher.submit(job);
      },
      onReport: (listener: Parameters<typeof dispatcher.onReport>[0]) => dispatcher.onReport(listener),
      onBroken: (listener: Parameters<typeof dispatcher.onBroken>[0]) => dispatcher.onBroken(listener),
      workers: () => dispatcher.workers(),
      close: () => dispatcher.close(),
    });
  };
  return {
    store,
    open,
    signal: stop.signal,
    starts,
    progress,
    computed: () => computed,
    onStart: (start) => void starts.push(start),
    onProgress: (now) => void progress.push(now),
  };
}

export function reading<T>(store: string, ask: (reading: Reading) => T | Promise<T>): Promise<T> {
  return withReading(store, ask);
}

export interface Scan {
  readonly bytes: Uint8Array;
  readonly file: string;
}

export function scan(text: string, file = 'plane.yaml'): Scan {
  return { bytes: new TextEncoder().encode(text), file };
}

/** Stable, metastable and unstable vacua, and every kind of column. */
export function plane(points: number, changes: Readonly<Record<string, string>> = {}): Scan {
  const sections: Record<string, string> = {
    title: 'A plane for tests',
    model: 'sm',
    seed: 'commands',
    sample: `{ method: sobol, points: ${points} }`,
    vary: '{ Mt: { range: [165, 185], unit: GeV }, Mh: { range: [115, 135], unit: GeV } }',
    define: '{ ratio: Mt / Mh }',
    require: '[perturbativity, { vacuum-stability: { accept: metastable } }]',
    note: '[measured-top-mass]',
    ...changes,
  };
  const lines = Object.entries(sections).map(([key, value]) => `${key}: ${value}`);
  return scan(`${lines.join('\n')}\n`);
}
