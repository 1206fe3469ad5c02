import { spawn } from 'node:child_process';
import type { ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll } from 'vitest';

/** The built program, driven as a process: what a user types and what a user sees. */

export const root = fileURLToPath(new URL('../..', import.meta.url));
export const program = join(root, 'dist', 'orchestrator', 'cli.js');

export interface Ended {
  readonly status: number | null;
  readonly signal: NodeJS.Signals | null;
  readonly out: string;
  readonly err: string;
}

export interface Running {
  readonly process: ChildProcess;
  readonly ended: Promise<Ended>;
  /** What was printed so far. */
  out(): string;
  err(): string;
  /** Resolves with the match as soon as standard error has it; rejects if the process ends before. */
  saying(pattern: RegExp): Promise<RegExpExecArray>;
}

export interface Place {
  readonly cwd?: string;
  readonly env?: Readonly<Record<string, string>>;
}

const folders: string[] = [];
const alive = new Set<ChildProcess>();
afterAll(() => {
  for (const child of alive) child.kill('SIGKILL');
  for (const folder of folders.splice(0)) rmSync(folder, { recursive: true, force: true });
});

/** An empty folder of this test file's own. */
export function newFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'trigpoint-cli-'));
  folders.push(folder);
  return folder;
}

export function start(words: readonly string[], { cwd = newFolder(), env = {} }: Place = {}): Running {
  const clean = { ...process.env, REDIS_URL: '', TRIGPOINT_DEBUG: '' };
  const child = spawn(process.execPath, [program, ...words], { cwd, env: { ...clean, ...env } });
  alive.add(child);
  const text = { out: '', err: '' };
  const listeners = new Set<() => void>();
  child.stdout.setEncoding('utf8').on('data', (piece: string) => (text.out += piece));
  child.stderr.setEncoding('utf8').on('data', (piece: string) => {
    text.err += piece;
    for (const listener of listeners) listener();
  });
  const ended = new Promise<Ended>((resolve) => {
    child.on('close', (status, signal) => {
      alive.delete(child);
      resolve({ status, signal, ...text });
    });
  });
  return {
    process: child,
    ended,
    out: () => text.out,
    err: () => text.err,
    saying: (pattern) =>
      new Promise((resolve, reject) => {
        const look = () => {
          const match = pattern.exec(text.err);
          if (match) resolve(match);
        };
        listeners.add(look);
        look();
        void ended.then(() => reject(new Error(`ended without saying ${pattern}: ${text.err}`)));
      }),
  };
}

export function trigpoint(words: readonly string[], place?: Place): Promise<Ended> {
  return start(words, place).ended;
}

/** Runs a command with --json and returns its one document. */
export async function document(words: readonly string[], place?: Place): Promise<Record<string, unknown>> {
  const { out, err } = await trigpoint([...words, '--json'], place);
  try {
    return JSON.parse(out) as Record<string, unknown>;
  } catch {
    throw new Error(`no JSON document: ${out}${err}`);
  }
}

/** A folder with scan files of a few seconds' work. */
export function folderWithScans(points: number, more = ''): string {
  const folder = newFolder();
  writeFileSync(join(folder, 'plane.yaml'), planeScan(points) + more);
  return folder;
}

/** A plane of M_t and M_h that holds stable, metastable and unstable vacua. */
export function planeScan(points: number): string {
  return `title: A plane for tests
model: sm
seed: cli
sample: { method: sobol, points: ${points} }
vary:
  Mt: { range: [165, 185], unit: GeV }
  Mh: { range: [115, 135], unit: GeV }
require: [perturbativity, { vacuum-stability: { accept: metastable } }]
note: [measured-top-mass]
`;
}
