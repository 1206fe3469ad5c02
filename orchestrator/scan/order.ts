import type { Mistake } from './plan.js';

/** More than this is noise, not help. */
const MOST = 200;

/** Sorted by place, each once, cut where there are too many to be of use. */
export function inOrder(mistakes: readonly Mistake[]): readonly Mistake[] {
  const sorted = [...mistakes].sort((a, b) => a.line - b.line || a.column - b.column);
  const once = sorted.filter((m, i) => i === 0 || JSON.stringify(m) !== JSON.stringify(sorted[i - 1]));
  if (once.length <= MOST) return once;
  const left = once.length - MOST;
  const more = {
    line: 0,
    column: 0,
    path: '',
    expected: 'fewer mistakes',
    found: `${left} more than are shown`,
  };
  return [...once.slice(0, MOST), more];
}
