import type { Constraint, ConstraintUse } from '../../workers/contract.js';
import type { Vocabulary } from './definitions.js';
import { didYouMean, quote } from './phrases.js';
import type { Plan } from './plan.js';
import type { Report } from './report.js';

/** `keep`: names of quantities and definitions, or all. What the constraints need is always kept, so that they can
 *  be judged again. */
export function readKeep(
  raw: unknown,
  words: Vocabulary,
  defined: Plan['define'],
  needed: readonly string[],
  report: Report,
): readonly string[] {
  const definitions = defined.map(({ name }) => name);
  const possible = new Set([...words.quantities, ...definitions]);
  const asked = raw ?? ['all'];
  if (!Array.isArray(asked)) {
    report.value(['keep'], {
      expected: 'a list of quantities, or [all]',
      found: report.describe(['keep'], raw),
    });
    return [];
  }
  asked.forEach((name: unknown, i) => checkKept(name, i, possible, words, report));
  const kept = asked.includes('all') ? [...possible] : (asked as string[]);
  return [...new Set([...kept, ...needed.filter((name) => possible.has(name))])].sort();
}

function checkKept(
  name: unknown,
  i: number,
  possible: ReadonlySet<string>,
  words: Vocabulary,
  report: Report,
): void {
  const at = ['keep', i];
  if (name === 'all' || (typeof name === 'string' && possible.has(name))) return;
  if (typeof name !== 'string') {
    return report.value(at, { expected: 'the name of a quantity', found: report.describe(at, name) });
  }
  const hint = words.inputs.has(name) ? 'inputs are always stored' : didYouMean(name, ['all', ...possible]);
  const expected = 'a quantity of the model, a definition or all';
  report.value(at, { expected, found: quote(name), ...(hint ? { hint } : {}) });
}

/** What constraints read; complains about one that the model cannot feed. */
export function needsOf(
  section: 'require' | 'note',
  uses: readonly ConstraintUse[],
  constraints: ReadonlyMap<string, Constraint>,
  words: Vocabulary,
  report: Report,
): readonly string[] {
  return uses.flatMap(({ name }) => {
    const needs = constraints.get(name)?.needs ?? [];
    const missing = needs.filter((need) => !words.inputs.has(need) && !words.quantities.has(need));
    if (missing.length > 0) {
      const found = `${name}, which needs ${missing.join(', ')}`;
      report.value([section], { expected: 'constraints that this model can feed', found });
    }
    return needs;
  });
}
