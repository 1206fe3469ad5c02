import { z } from 'zod';
import type { Constraint, InputSpec, Model } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { models } from '../../workers/models/catalogue.js';
import { quantitiesOf } from '../../workers/quantities.js';
import { mapping } from './check.js';
import { defaultsOf } from './judging.js';
import {
  aboutInput,
  AXES,
  DEFINED_NAME,
  expression,
  optionsOf,
  running,
  sample,
  seed,
  stratum,
  title,
  value,
} from './shape.js';

/** JSON Schema (2020-12) of a scan file, for editors that complete and check while one types. It is built from the
 *  same parts as the reader, for all shipped models and constraints together. What a schema cannot say (domains,
 *  rising ranges, what goes with which sampler or model) only `check` finds. */
export function scanSchema(): object {
  const shape = scanShape([...models.values()], [...constraints.values()]);
  const schema = z.toJSONSchema(shape, { target: 'draft-2020-12', io: 'input', reused: 'ref' });
  return { title: 'Trigpoint scan file', ...schema };
}

function scanShape(known: readonly Model[], judges: readonly Constraint[]): z.ZodType {
  const inputs = inputsOf(known);
  const vary = perInput(inputs, z.union([AXES.range, AXES.gaussian, AXES.list])).describe(
    'Inputs that are varied, each over a range, a gaussian or a list.',
  );
  const use = z.union(judges.flatMap(usesOf)).describe('A constraint: its name, or { name: options }.');
  return mapping(
    {
      title: title.optional(),
      model: modelOf(known),
      seed: seed.optional(),
      sample: z
        .union([mapping(sample, ''), z.array(mapping({ ...stratum, vary: vary.optional() }, '')).min(1)])
        .optional()
        .describe('How points are chosen: one sampler, or a list of strata, each with its own.'),
      vary: vary.optional(),
      fix: perInput(inputs, value)
        .optional()
        .describe('Inputs with one value; the others keep their default.'),
      define: z
        .record(z.string().regex(DEFINED_NAME), z.union([expression, z.number()]))
        .optional()
        .describe(
          'Names for expressions of inputs and other definitions; a name of an input sets that input.',
        ),
      running: running.optional(),
      require: z.array(use).optional().describe('Constraints that decide survival.'),
      note: z
        .array(use)
        .optional()
        .describe('Constraints that are evaluated and recorded but never exclude.'),
      keep: z
        .array(z.union([z.enum(['all', ...quantityNames(known)]), z.string()]))
        .optional()
        .describe(
          'Quantities and definitions to store, or [all] (default); what constraints need is always kept.',
        ),
    },
    '',
  ).describe('A parameter scan.');
}

/** Inputs of all models; where two models share a name, the first one's words. */
function inputsOf(known: readonly Model[]): ReadonlyMap<string, InputSpec> {
  return new Map([...known].reverse().flatMap(({ inputs }) => inputs.map((input) => [input.name, input])));
}

/** Quantities of all models with their default options and settings: what an editor offers. */
function quantityNames(known: readonly Model[]): readonly string[] {
  const all = known.flatMap((model) =>
    quantitiesOf(model, { loops: 3, tolerance: 1e-9 }, defaultsOf(model.options)),
  );
  return [...new Set(all.map(({ name }) => name))].sort();
}

function perInput(inputs: ReadonlyMap<string, InputSpec>, one: z.ZodType): z.ZodType {
  const entries = [...inputs].map(
    ([name, input]) => [name, one.optional().describe(aboutInput(input))] as const,
  );
  return mapping(Object.fromEntries(entries), '');
}

function modelOf(known: readonly Model[]): z.ZodType {
  const full = known.map(({ name, title: meaning, options }) =>
    mapping({ name: z.literal(name).describe(meaning), options: optionsOf(options).optional() }, ''),
  );
  const names = known.map(({ name, title: meaning }) => z.literal(name).describe(meaning));
  return z.union([...names, ...full]).describe('The model: its name, or { name, options }.');
}

function usesOf({ name, title: meaning, options }: Constraint): z.ZodType[] {
  return [z.literal(name).describe(meaning), mapping({ [name]: optionsOf(options) }, '').describe(meaning)];
}
