import type { ConstraintUse, Model, Options, RunningSettings, Task } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { UserMistake } from '../mistakes.js';
import { shortNumber } from '../scan/phrases.js';
import type { Plan } from '../scan/plan.js';
import { readScan } from '../scan/read-scan.js';
import type { PointFacts } from './commands.js';
import { evaluatePoint } from './evaluate-point.js';
import { defaultsOf, modelNamed, USUAL_RUNNING } from './models.js';
import { checkNames } from './named.js';

export interface PointRequest {
  readonly model: string;
  /** Values of inputs; the others have the defaults of the model, or those that the plan fixes. */
  readonly set: Readonly<Record<string, number>>;
  /** Options of the model, as typed. */
  readonly options: Readonly<Record<string, string>>;
  readonly loops?: RunningSettings['loops'];
  readonly tolerance?: number;
  /** A scan file whose definitions, running, requirements and fixed inputs the point is evaluated with. */
  readonly scan?: { readonly bytes: Uint8Array; readonly file: string };
  /** Or the plan of a run, with the same meaning. */
  readonly plan?: Plan;
}

/** Evaluates one point. Without a scan file or plan every constraint of the catalogue decides, with its default options.
 *  @throws UserMistake for a name or value that does not fit, FileMistakes for the scan file */
export function point(request: PointRequest): PointFacts {
  const model = modelNamed(request.model);
  const plan = request.scan ? readScan(request.scan.bytes, request.scan.file).plan : request.plan;
  const frame = plan ? frameOfPlan(plan, model, request.scan ? '--scan' : '--run') : frameOfCatalogue(model);
  const defined = frame.define.map((definition) => definition.name);
  const free = model.inputs.filter((input) => !defined.includes(input.name));
  checkNames(
    Object.keys(request.set),
    free.map((input) => input.name),
    '--set',
    `an input of ${model.name}`,
  );
  for (const input of free) checkDomain(input, request.set[input.name]);
  const inputs = free.map(({ name, default: usual }) => [
    name,
    request.set[name] ?? frame.fix[name] ?? usual,
  ]);
  return evaluatePoint({
    model,
    options: { ...frame.options, ...chosenOptions(model, request.options) },
    running: {
      loops: request.loops ?? frame.running.loops,
      tolerance: request.tolerance ?? frame.running.tolerance,
    },
    inputs: Object.fromEntries(inputs) as Record<string, number>,
    define: frame.define,
    constraints: frame.constraints,
    deciding: frame.deciding,
  });
}

/** What a point is evaluated with beside its inputs. */
interface Frame {
  readonly options: Options;
  readonly running: RunningSettings;
  readonly fix: Readonly<Record<string, number>>;
  readonly define: Task['define'];
  readonly constraints: readonly ConstraintUse[];
  readonly deciding: number;
}

function frameOfCatalogue(model: Model): Frame {
  const uses = [...constraints.values()].map(({ name, options }) => ({ name, options: defaultsOf(options) }));
  const options = defaultsOf(model.options);
  return { options, running: USUAL_RUNNING, fix: {}, define: [], constraints: uses, deciding: uses.length };
}

function frameOfPlan(plan: Plan, model: Model, where: string): Frame {
  if (plan.model.name !== model.name)
    throw new UserMistake({ where, expected: `a plan of ${model.name}`, found: `one of ${plan.model.name}` });
  return {
    options: plan.model.options,
    running: plan.running,
    fix: plan.fix,
    define: plan.define,
    constraints: [...plan.require, ...plan.note],
    deciding: plan.require.length,
  };
}

function checkDomain({ name, domain, unit }: Model['inputs'][number], x: number | undefined): void {
  if (x === undefined || (x >= domain[0] && x <= domain[1])) return;
  const suffix = unit === '1' ? '' : ` ${unit}`;
  throw new UserMistake({
    where: `--set ${name}`,
    expected: `a value from ${shortNumber(domain[0])} to ${shortNumber(domain[1])}${suffix}`,
    found: String(x),
  });
}

function chosenOptions(model: Model, words: Readonly<Record<string, string>>): Options {
  checkNames(Object.keys(words), Object.keys(model.options), '--option', `an option of ${model.name}`);
  const chosen = Object.entries(words).map(([name, text]) => [
    name,
    optionValue(model.options[name], name, text),
  ]);
  return Object.fromEntries(chosen) as Options;
}

function optionValue(spec: Model['options'][string], name: string, text: string): string | number {
  if (spec.kind === 'choice' && spec.values.includes(text)) return text;
  const number = Number(text);
  if (spec.kind === 'number' && text !== '' && number >= spec.range[0] && number <= spec.range[1])
    return number;
  const expected =
    spec.kind === 'choice'
      ? `one of ${spec.values.join(', ')}`
      : `a number from ${spec.range[0]} to ${spec.range[1]}`;
  throw new UserMistake({ where: `--option ${name}`, expected, found: JSON.stringify(text) });
}
