import { readFileSync } from 'node:fs';
import type { Block } from '../../../workers/contract.js';

export interface GoldenPoint {
  readonly name: string;
  readonly Mt: number;
  readonly cutoff: number;
  readonly loops: 1 | 2 | 3;
  readonly start: Readonly<Record<'gY' | 'g2' | 'g3' | 'yt' | 'yb' | 'ytau' | 'lam', number>>;
  readonly expected: Readonly<Record<string, number | null>> & {
    readonly couplingsAtCutoff: Readonly<Record<string, number>> | null;
  };
}

/** What make.py beside this file computed with scipy. */
export const goldenPoints = JSON.parse(
  readFileSync(new URL('golden.json', import.meta.url), 'utf8'),
) as readonly GoldenPoint[];

/** A block whose matching is done: the start values as the module `matching` would have left them. */
export function blockOf(points: readonly GoldenPoint[]): Block {
  const column = (value: (p: GoldenPoint) => number): Float64Array => Float64Array.from(points, value);
  const columns = new Map([
    ['Mt', column((p) => p.Mt)],
    ['cutoff', column((p) => p.cutoff)],
    ['gYAtStart', column((p) => p.start.gY)],
    ['g2AtStart', column((p) => p.start.g2)],
    ['g3AtStart', column((p) => p.start.g3)],
    ['ytAtStart', column((p) => p.start.yt)],
    ['ybAtStart', column((p) => p.start.yb)],
    ['ytauAtStart', column((p) => p.start.ytau)],
    ['lambdaAtStart', column((p) => p.start.lam)],
    ['m2AtStart', column(() => -8650)],
  ]);
  return { count: points.length, columns, failure: new Uint8Array(points.length) };
}
