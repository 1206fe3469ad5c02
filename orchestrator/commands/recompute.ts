import { randomUUID } from 'node:crypto';
import type { PointsBlock, ResultBlock, Task } from '../../workers/contract.js';
import type { ChunkReport, OpenDispatcher } from '../dispatch/dispatcher.js';
import { Broken } from '../mistakes.js';

/** Points to evaluate together, and what they are called when they come back. */
export interface Portion<T> {
  readonly points: PointsBlock;
  readonly label: T;
}

/** Evaluates portions on workers, in no particular order, with a bounded number in flight. Nothing is stored.
 *  @throws Broken where a worker could not do a portion */
export async function* recompute<T>(
  task: Task,
  portions: Iterable<Portion<T>>,
  open: OpenDispatcher,
): AsyncGenerator<Portion<T> & { readonly result: ResultBlock }> {
  // Two at once on one queue server must not read each other's answers.
  const dispatcher = await open(task, `verify-${randomUUID()}`);
  const flying = new Map<string, Portion<T>>();
  const reports = mailbox<ChunkReport>();
  dispatcher.onReport(reports.put);
  dispatcher.onBroken(reports.fail);
  try {
    const waiting = portions[Symbol.iterator]();
    let number = 0;
    const fill = () => {
      for (; flying.size < dispatcher.capacity(); number += 1) {
        const next = waiting.next();
        if (next.done) return;
        flying.set(`verify.${number}`, next.value);
        const { count, values } = next.value.points;
        dispatcher.submit({ id: `verify.${number}`, points: { count, values: values.slice() } });
      }
    };
    for (fill(); flying.size > 0; fill()) {
      const report = await reports.take();
      const portion = flying.get(report.id);
      if (!portion) continue;
      if (report.kind === 'returned') {
        dispatcher.submit({
          id: report.id,
          points: { ...portion.points, values: portion.points.values.slice() },
        });
        continue;
      }
      if (report.kind === 'lost')
        throw new Broken('worker-lost', `a worker could not do its points: ${report.reason}`);
      flying.delete(report.id);
      yield { ...portion, result: report.result };
    }
  } finally {
    await dispatcher.close();
  }
}

/** A queue of what listeners hear, to be taken one at a time. */
function mailbox<T>() {
  const letters: T[] = [];
  let broken: Error | undefined;
  let wake: () => void = () => undefined;
  return {
    put: (letter: T) => {
      letters.push(letter);
      wake();
    },
    fail: (error: Error) => {
      broken = error;
      wake();
    },
    async take(): Promise<T> {
      while (letters.length === 0) {
        if (broken) throw broken;
        await new Promise<void>((resolve) => (wake = resolve));
      }
      return letters.shift()!;
    },
  };
}
