import type { Catalogue } from '../../dashboard/commands.js';
import type { Plan } from '../scan/plan.js';
import { constraintNamed } from './constraints.js';
import { modelNamed } from './models.js';

/** What the model and the constraints of a plan are, as the catalogue of this version says it. */
export function catalogueOf(plan: Plan): Catalogue {
  const model = modelNamed(plan.model.name);
  const { name, title, content, sources, inputs } = model;
  const modules = model.modules(plan.running, plan.model.options);
  return {
    model: { name, title, content, sources },
    inputs,
    modules: modules.map((module) => ({ name: module.name, gives: module.gives })),
    constraints: [...plan.require, ...plan.note].map(({ name, options }) => {
      const { title, needs, marginScale, formula, sources, validity, neglects } = constraintNamed(name);
      return { name, title, uses: options, needs, marginScale, formula, sources, validity, neglects };
    }),
  };
}
