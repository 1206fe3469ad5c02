import type { Model, Options, QuantitySpec, RunningSettings } from './contract.js';

/** Everything that the modules of a model give, in the order they are evaluated. */
export function quantitiesOf(model: Model, settings: RunningSettings, options: Options): QuantitySpec[] {
  return model.modules(settings, options).flatMap((module) => module.gives);
}
