import { fileURLToPath } from 'node:url';
import type { Coordinated } from '../../orchestrator/dispatch/coordinator.js';
import { openThreads } from '../../orchestrator/dispatch/threads.js';
import { coordinate } from '../../orchestrator/dispatch/coordinator.js';
import type { Plan } from '../../orchestrator/scan/plan.js';
import {
  createLineRun,
  LINE_WORKER,
  linePlan,
  lineRun,
  temporaryStore,
} from '../orchestrator/dispatch/line-run.js';
import { program, type Program } from './processes.js';

const WORK = fileURLToPath(new URL('programs/work.mjs', import.meta.url));

/** Starts a coordinator in a process of its own. */
export function startWork(store: string, plan: Plan, dispatcher: object): Program {
  const order = { store, newRun: lineRun(plan), program: LINE_WORKER, code: 'test', ...dispatcher };
  return program([WORK, JSON.stringify(order)]);
}

/** What a coordinator that ended well said last. */
export async function resultOf(work: Program): Promise<Coordinated> {
  const status = await work.exit;
  if (status !== 0) throw new Error(`the coordinator ended with ${status}: ${work.err()}`);
  return JSON.parse(work.out().trim().split('\n').at(-1) ?? '') as Coordinated;
}

/** Points committed so far, as far as the coordinator said. */
export function pointsOf(work: Program): number {
  const lines = work.out().trim().split('\n').filter(Boolean);
  return lines.length === 0 ? 0 : (JSON.parse(lines[lines.length - 1]) as Coordinated).counts.points;
}

/** Resolves once more than `points` points are committed. */
export async function committed(work: Program, points: number): Promise<void> {
  while (pointsOf(work) <= points) await work.says(new RegExp(`(?:.*\n){${lineCount(work) + 1}}`));
}

function lineCount(work: Program): number {
  return (work.out() + work.err()).split('\n').length - 1;
}

/** The digest of a run that nobody disturbed, made in this process. */
export async function undisturbedDigest(points: readonly number[]): Promise<string> {
  const store = temporaryStore();
  const writing = store.open();
  try {
    const plan = linePlan(points);
    const run = createLineRun(writing, plan);
    const open = openThreads(2, { program: LINE_WORKER });
    const signal = new AbortController().signal;
    const done = await coordinate({ store: writing, run, plan, open, signal, onProgress: () => undefined });
    if (!done.digest) throw new Error('the undisturbed run did not finish');
    return done.digest;
  } finally {
    writing.close();
    store.remove();
  }
}
