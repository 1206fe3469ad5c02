import type {
  ConstraintUse,
  Model,
  Options,
  QuantitySpec,
  ResultBlock,
  RunningSettings,
  Task,
} from '../../workers/contract.js';
import { FAILURES, OUTCOMES, VERDICTS } from '../../workers/contract.js';
import { createEvaluator } from '../../workers/evaluate.js';
import { quantitiesOf } from '../../workers/quantities.js';
import { fingerprint } from '../provenance/canonical.js';
import { codeOfTask } from '../provenance/fingerprints.js';
import type { PointFacts } from './commands.js';
import { constraintNamed } from './constraints.js';

/** Everything one point is a function of, but for the code. */
export interface PointQuestion {
  readonly model: Model;
  readonly options: Options;
  readonly running: RunningSettings;
  /** A value for every input of the model that no definition sets. */
  readonly inputs: Readonly<Record<string, number>>;
  readonly define: Task['define'];
  readonly constraints: readonly ConstraintUse[];
  /** How many of `constraints`, counted from the first, decide survival. */
  readonly deciding: number;
}

/** One point through the very evaluator that scans use, with every quantity kept. */
export function evaluatePoint(question: PointQuestion): PointFacts {
  return factsOfResult(question, resultOfPoint(question));
}

/** The result as a scan would store it. */
export function resultOfPoint(question: PointQuestion): { task: Task; result: ResultBlock } {
  const task = taskOfPoint(question);
  const values = Float64Array.from(task.varied, (name) => question.inputs[name]);
  return { task, result: createEvaluator(task).evaluate({ count: 1, values }) };
}

/** The result for people and programs, with a fingerprint of it and of everything that it is a function of. */
export function factsOfResult(
  question: PointQuestion,
  { task, result }: { task: Task; result: ResultBlock },
): PointFacts {
  const facts = factsOf(question, task, result);
  const { options, running, inputs, define, constraints, deciding } = question;
  const asked = { options, running, inputs, define, constraints, deciding };
  const code = codeOfTask(task);
  return { format: 1, ...facts, fingerprint: fingerprint({ asked, code, facts }) };
}

/** The task of which this one point is the whole scan. */
function taskOfPoint(question: PointQuestion): Task {
  const { model, options, running, inputs, define, constraints, deciding } = question;
  const quantities = quantitiesOf(model, running, options).map((spec) => spec.name);
  return {
    model: { name: model.name, options },
    running,
    varied: Object.keys(inputs).sort(),
    fixed: {},
    define,
    constraints,
    deciding,
    keep: [...define.map((definition) => definition.name), ...quantities],
  };
}

type Facts = Omit<PointFacts, 'format' | 'fingerprint'>;

function factsOf(question: PointQuestion, task: Task, result: ResultBlock): Facts {
  const kept = new Map(task.keep.map((name, i) => [name, result.quantities[i]]));
  const known = new Map([...Object.entries(question.inputs), ...kept]);
  return {
    model: question.model.name,
    inputs: inputFacts(question.model, known),
    couplings: couplingFacts(question, known),
    quantities: quantityFacts(question, kept),
    constraints: constraintFacts(question, known, result),
    verdict: VERDICTS[result.verdicts[0]],
    reason: result.failures[0] === 0 ? null : FAILURES[result.failures[0]],
  };
}

function inputFacts(model: Model, known: ReadonlyMap<string, number>): Facts['inputs'] {
  return Object.fromEntries(
    model.inputs.map(({ name, unit }) => [name, { value: finite(known.get(name)), unit }]),
  );
}

function couplingFacts(question: PointQuestion, known: ReadonlyMap<string, number>): Facts['couplings'] {
  const { model, running, options } = question;
  const names = new Set(model.inputs.map((input) => input.name));
  const inputs = new Map([...known].filter(([name]) => names.has(name)));
  const places = [
    { at: 'start', scale: model.startScale(inputs) },
    { at: 'cutoff', scale: inputs.get('cutoff') ?? NaN },
  ];
  const scales = places.map((place) => place.scale);
  const traced = model.trace(running, options, inputs, scales);
  return places.map(({ at, scale }, k) => ({
    scale: { value: finite(scale), unit: 'GeV' },
    at,
    values: Object.fromEntries(model.couplings.map(({ name }, i) => [name, finite(traced[k][i])])),
  }));
}

function quantityFacts(question: PointQuestion, kept: ReadonlyMap<string, number>): Facts['quantities'] {
  const { model, running, options, define } = question;
  const specs = quantitiesOf(model, running, options);
  const inputs = new Map(model.inputs.map((input) => [input.name, input.unit]));
  const own = define.filter(({ name }) => !inputs.has(name));
  const fact = (spec: Pick<QuantitySpec, 'name' | 'unit'>) =>
    [spec.name, quantityFact(spec, finite(kept.get(spec.name)))] as const;
  return Object.fromEntries([...own.map(({ name }) => fact({ name, unit: '1' })), ...specs.map(fact)]);
}

function quantityFact(
  spec: Partial<QuantitySpec> & { unit: string },
  value: number | null,
): Facts['quantities'][string] {
  const { unit, labels, absent, caution } = spec;
  return {
    value,
    unit,
    ...(labels && value !== null ? { label: labels[value] } : {}),
    ...(absent !== undefined && value === null ? { absent } : {}),
    ...(caution === undefined ? {} : { caution }),
  };
}

function constraintFacts(
  question: PointQuestion,
  known: ReadonlyMap<string, number>,
  result: ResultBlock,
): Facts['constraints'] {
  const entries = question.constraints.map(({ name, options }, i) => {
    const outcome = OUTCOMES[result.outcomes[i]];
    const failed = result.failures[0] !== 0;
    const fact = {
      outcome,
      margin: finite(result.margins[i]),
      logLikelihood: finite(result.logLikelihoods[i]),
      detail: failed ? 'not judged: the point failed' : constraintNamed(name).explain(known, options),
      deciding: i < question.deciding,
    };
    return [name, fact] as const;
  });
  return Object.fromEntries(entries);
}

/** JSON knows no NaN: what is absent is null. */
function finite(x: number | undefined): number | null {
  return x !== undefined && Number.isFinite(x) ? x : null;
}
