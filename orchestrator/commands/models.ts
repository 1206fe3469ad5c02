import type {
  InputSpec,
  Model,
  OptionSpec,
  QuantitySpec,
  RunningSettings,
  Source,
} from '../../workers/contract.js';
import { models } from '../../workers/models/catalogue.js';
import { named } from './named.js';

export interface ModelsFacts {
  readonly format: 1;
  readonly models: readonly { readonly name: string; readonly title: string; readonly content: string }[];
}

export interface ModelFacts {
  readonly format: 1;
  readonly name: string;
  readonly title: string;
  readonly content: string;
  readonly options: Readonly<Record<string, OptionSpec>>;
  readonly inputs: readonly InputSpec[];
  readonly couplings: readonly QuantitySpec[];
  readonly modules: readonly { readonly name: string; readonly gives: readonly QuantitySpec[] }[];
  readonly sources: readonly Source[];
}

/** What a scan file that says nothing about running gets. */
export const USUAL_RUNNING: RunningSettings = { loops: 3, tolerance: 1e-9 };

export function listModels(): ModelsFacts {
  const list = [...models.values()].map(({ name, title, content }) => ({ name, title, content }));
  return { format: 1, models: list };
}

export function describeModel(name: string): ModelFacts {
  const model = modelNamed(name);
  const { title, content, options, inputs, couplings, sources } = model;
  const modules = model
    .modules(USUAL_RUNNING, defaultsOf(options))
    .map((module) => ({ name: module.name, gives: module.gives }));
  return { format: 1, name, title, content, options, inputs, couplings, modules, sources };
}

/** @throws UserMistake with the nearest name */
export function modelNamed(name: string): Model {
  return named(models, name, 'MODEL', 'a model');
}

export function defaultsOf(options: Readonly<Record<string, OptionSpec>>): Record<string, string | number> {
  return Object.fromEntries(Object.entries(options).map(([key, spec]) => [key, spec.default]));
}
