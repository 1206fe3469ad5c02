import type { Task } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { models } from '../../workers/models/catalogue.js';
import { Broken } from '../mistakes.js';
import type { Plan } from '../scan/plan.js';
import type { Fingerprints } from '../store/records.js';
import { fingerprint } from './canonical.js';
import { codeFingerprint } from './code.js';

/** Fingerprints of everything the results of a plan are a function of.
 *  @throws Broken 'unknown-name' for a model or constraint that this version does not have */
export function fingerprintsOf(plan: Plan, task: Task): Fingerprints {
  return {
    plan: fingerprint(plan),
    task: fingerprint(task),
    ...codeOfTask(task),
    sampling: codeOf(here('../sampling/sampler.js')),
  };
}

/** Fingerprints of the code that turns inputs into results.
 *  @throws Broken 'unknown-name' for a model or constraint that this version does not have */
export function codeOfTask(task: Task): Pick<Fingerprints, 'model' | 'modules' | 'constraints'> {
  const model = known(models, task.model.name, 'model');
  const modules = model.modules(task.running, task.model.options);
  return {
    model: codeOf(model.code),
    modules: {
      ...Object.fromEntries(modules.map((module) => [module.name, codeOf(module.code)])),
      // What calls the modules and compiles definitions.
      evaluation: codeOf(here('../../workers/evaluate.js')),
    },
    constraints: Object.fromEntries(
      task.constraints.map(({ name }) => [name, judging(known(constraints, name, 'constraint').code)]),
    ),
  };
}

/** A judgement is a function of its constraint and of the code that applies it: a run that was judged again keeps its
 *  parent's modules, not its parent's way of judging. */
function judging(url: string): string {
  return fingerprint([codeOf(url), codeOf(here('../../workers/judge.js'))]);
}

/** A catalogue only says where things are: what a plan uses of it has a fingerprint of its own, and what it does
 *  not use must not end the reuse of its results. */
function codeOf(url: string): string {
  return codeFingerprint(url, CATALOGUES.map(here));
}

const CATALOGUES = ['../../workers/models/catalogue.js', '../../workers/constraints/catalogue.js'];

function here(path: string): string {
  return new URL(path, import.meta.url).href;
}

function known<T>(catalogue: ReadonlyMap<string, T>, name: string, what: string): T {
  const entry = catalogue.get(name);
  if (entry === undefined) throw new Broken('unknown-name', `this version has no ${what} called ${name}`);
  return entry;
}
