import type { InputSpec } from '../../workers/contract.js';
import { models } from '../../workers/models/catalogue.js';
import { UserMistake } from '../mistakes.js';
import { didYouMean, quote, shortNumber } from '../scan/phrases.js';
import type { Axis, Plan, Stratum } from '../scan/plan.js';
import { MOST_VALUES } from '../scan/shape.js';
import { newBoxes } from './boxes.js';
import { grownName, rootOf } from './family.js';
import { newGrids } from './grid-growth.js';
import type { Family, Wider, Widening } from './widening.js';

/** Appends strata that cover what is new; see extendPlan for the rules.
 *  @param notes receives sentences for the user */
export function widen(plan: Plan, wider: Widening, notes: string[]): readonly Stratum[] {
  const inputs = new Map(models.get(plan.model.name)?.inputs.map((input) => [input.name, input]));
  for (const [name, change] of Object.entries(wider)) requireSensible(name, change, inputs, plan.strata);
  const strata = [...plan.strata];
  for (const family of familiesOf(plan.strata)) {
    const changes = changesFor(family[0], wider, notes);
    if (Object.keys(changes).length === 0) continue;
    const pieces = family[0].method === 'grid' ? newGrids(family, changes) : newBoxes(family, changes);
    for (const { vary, points } of pieces) {
      const root = rootOf(family[0]);
      strata.push({ ...family[0], name: grownName(root, strata), points, vary, grownFrom: root });
    }
  }
  return strata;
}

function familiesOf(strata: readonly Stratum[]): readonly Family[] {
  const families = new Map<string, [Stratum, ...Stratum[]]>();
  for (const stratum of strata) {
    const family = families.get(rootOf(stratum));
    if (family) family.push(stratum);
    else families.set(rootOf(stratum), [stratum]);
  }
  return [...families.values()];
}

/** The changes that concern a stratum. A gaussian reaches everywhere already. */
function changesFor(root: Stratum, wider: Widening, notes: string[]): Widening {
  const entries = Object.entries(wider).filter(([name]) => {
    const axis = root.vary.find(({ input }) => input === name);
    if (axis?.kind === 'gaussian') notes.push(`${name} is gaussian in ${root.name}, which stays as it is`);
    return axis !== undefined && axis.kind !== 'gaussian';
  });
  return Object.fromEntries(entries);
}

function requireSensible(
  name: string,
  { range, steps, list }: Wider,
  inputs: ReadonlyMap<string, InputSpec>,
  strata: readonly Stratum[],
): void {
  const where = `--vary ${name}`;
  const axes = strata.flatMap(({ vary }) => vary).filter(({ kind }) => kind !== 'gaussian');
  const names = [...new Set(axes.map(({ input }) => input))].sort();
  const input = inputs.get(name);
  if (!input || !names.includes(name)) {
    const hint = didYouMean(name, names);
    const expected = `an input that the run varies over a range or list${names.length ? `: ${names.join(', ')}` : ''}`;
    throw new UserMistake({ where, expected, found: quote(name), ...(hint ? { hint } : {}) });
  }
  const mine = axes.filter(
    (axis): axis is Axis & { kind: 'range' } => axis.input === name && axis.kind === 'range',
  );
  if (range && !(range[0] < range[1])) {
    throw new UserMistake({ where, expected: 'a range that rises', found: range.join(':') });
  }
  for (const x of [...(range ?? []), ...(list ?? [])])
    requireAllowed(
      x,
      input,
      mine.some(({ scale }) => scale === 'log'),
      where,
    );
  if (steps !== undefined && !(Number.isSafeInteger(steps) && steps >= 2 && steps <= MOST_VALUES)) {
    throw new UserMistake({ where, expected: `2 to ${MOST_VALUES} steps`, found: String(steps) });
  }
}

function requireAllowed(x: number, input: InputSpec, logarithmic: boolean, where: string): void {
  const [low, high] = input.domain;
  const unit = input.unit === '1' ? '' : ` ${input.unit}`;
  if (!(x >= low && x <= high)) {
    throw new UserMistake({
      where,
      expected: `${input.name} from ${shortNumber(low)} to ${shortNumber(high)}${unit}`,
      found: `${x}${unit}`,
    });
  }
  if (logarithmic && x <= 0) {
    throw new UserMistake({ where, expected: 'a positive number for scale: log', found: String(x) });
  }
}
