import type { Constraint, ConstraintUse, InputSpec, Model, Module } from '../../workers/contract.js';
import { compile } from '../../workers/expressions/compile.js';
import type { Plan } from './plan.js';

/** Sentences the user should read before trusting a plan: an input that is chosen but that nothing depends on,
 *  or a plan that cannot exclude anything. */
export function remarksOn(
  plan: Omit<Plan, 'remarks'>,
  model: Model,
  constraints: ReadonlyMap<string, Constraint>,
): readonly string[] {
  const uses = [...plan.require, ...plan.note];
  const used = usedNames(model.modules(plan.running, plan.model.options), uses, plan.define, constraints);
  const varied = new Set(plan.strata.flatMap(({ vary }) => vary.map(({ input }) => input)));
  const defined = new Set(plan.define.map(({ name }) => name));
  const idle = model.inputs.flatMap((input) => {
    const how = howChosen(input, plan, varied, defined);
    return how && !used.has(input.name)
      ? [`${input.name} is ${how}, but nothing in this plan depends on it`]
      : [];
  });
  const nothing =
    plan.require.length === 0 ? ['nothing is required: every point that does not fail survives'] : [];
  return [...idle, ...nothing];
}

function howChosen(
  input: InputSpec,
  plan: Omit<Plan, 'remarks'>,
  varied: ReadonlySet<string>,
  defined: ReadonlySet<string>,
): string | undefined {
  if (varied.has(input.name)) return 'varied';
  if (defined.has(input.name)) return 'set by a definition';
  return plan.fix[input.name] === input.default ? undefined : 'fixed away from its default';
}

function usedNames(
  modules: readonly Module[],
  uses: readonly ConstraintUse[],
  define: Plan['define'],
  constraints: ReadonlyMap<string, Constraint>,
): ReadonlySet<string> {
  return new Set([
    ...modules.flatMap(({ needs }) => needs),
    ...uses.flatMap(({ name }) => constraints.get(name)?.needs ?? []),
    ...define.flatMap(({ expression }) => compile(expression).names),
  ]);
}
