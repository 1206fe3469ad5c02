import type { AsyncQuestions } from './reading.js';

/** What can be asked of the reader thread. */
export const METHODS = [
  'runs',
  'run',
  'columns',
  'constraints',
  'reason',
  'chunks',
  'counts',
  'page',
  'density',
  'scatter',
  'cutFlow',
  'slice',
  'point',
] as const satisfies readonly Exclude<keyof AsyncQuestions, 'close'>[];

export interface ReaderRequest {
  readonly id: number;
  readonly method: (typeof METHODS)[number];
  readonly args: readonly unknown[];
}

export type ReaderAnswer =
  | { readonly id: number; readonly value: unknown }
  | {
      readonly id: number;
      readonly trouble: { readonly code: string; readonly exit: 1 | 2 | 3; readonly message: string };
    };
