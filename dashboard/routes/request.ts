import type { Request } from 'express';
import type { AsyncQuestions } from '../../orchestrator/store/reading.js';
import type { RunRecord } from '../../orchestrator/store/records.js';
import { Refusal } from '../refusal.js';

/** The query of a request; `+` and percent signs are decoded as forms send them. */
export function queryOf(request: Request): URLSearchParams {
  return new URL(request.originalUrl, 'http://localhost').searchParams;
}

/** A whole number in the path.
 *  @throws Refusal if it is none */
export function numberIn(request: Request, name: string): number {
  const text = String(request.params[name]);
  if (/^\d{1,15}$/.test(text)) return Number(text);
  throw new Refusal(
    404,
    'There is no such page',
    `Expected a number as the ${name}, found “${text.slice(0, 40)}”.`,
  );
}

/** @throws Refusal if the store has no such run */
export async function runOf(request: Request, questions: AsyncQuestions): Promise<RunRecord> {
  const id = numberIn(request, 'run');
  const run = await questions.run(id);
  if (run) return run;
  throw new Refusal(
    404,
    `There is no run ${id}`,
    'This store does not hold it. The list of runs shows what there is.',
  );
}
