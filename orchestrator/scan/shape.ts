import { z } from 'zod';
import type { InputSpec, OptionSpec } from '../../workers/contract.js';
import { mapping } from './check.js';
import { oneOf } from './phrases.js';
import { METHODS } from './plan.js';

/** The parts of a scan file, each as a schema whose messages are what a mistake says was expected. */

export const MOST_POINTS = 100_000_000;
export const MOST_STRATA = 64;
export const MOST_VALUES = 100_000;

export const number = z.number({ error: 'a number' });
const unit = z.string({ error: 'a unit, e.g. GeV' }).max(20, { error: 'a unit, e.g. GeV' });
const name = z
  .string({ error: 'a name' })
  .regex(/^[a-z][a-z0-9-]{0,39}$/, { error: 'a name of small letters, digits and "-"' });

/** Titles and seeds are shown in terminals and pages. */
const PRINTABLE = /^[^\u0000-\u001f\u007f-\u009f]*$/;
export const title = z
  .string({ error: 'a title in text' })
  .min(1, { error: 'a title' })
  .max(200, { error: 'a title of at most 200 characters' })
  .regex(PRINTABLE, { error: 'a title in one line' })
  .describe('What the scan is about, in one line.');

const SEED = { error: 'a whole number or a text of 1 to 200 characters (long numbers in quotes)' };
export const seed = z
  .union(
    [
      z.string(SEED).min(1, SEED).max(200, SEED).regex(PRINTABLE, SEED),
      z.int(SEED).min(Number.MIN_SAFE_INTEGER, SEED).max(Number.MAX_SAFE_INTEGER, SEED),
    ],
    SEED,
  )
  .describe('Everything random follows from it: the same seed gives the same points. Default "1".');

export const points = z
  .int({ error: 'a whole number of points' })
  .min(1, { error: 'at least 1 point' })
  .max(MOST_POINTS, { error: `at most ${MOST_POINTS} points` })
  .describe('How many points. Not with a grid: there the steps say it. Default 10000.');

export const method = z
  .enum(METHODS, { error: oneOf(METHODS) })
  .describe('How points are chosen. Default sobol: a scrambled low-discrepancy sequence that can grow.');

const steps = z
  .int({ error: 'a whole number of values' })
  .min(2, { error: 'at least 2 values (one value belongs under fix)' })
  .max(MOST_VALUES, { error: `at most ${MOST_VALUES} values` })
  .describe('Grid only: number of values, both ends included.');

const pair = (what: string) => z.tuple([number, number], { error: `two numbers, ${what}` }).describe(what);

export const AXES = {
  range: mapping(
    {
      range: pair('[from, to]'),
      scale: z
        .enum(['linear', 'log'], { error: 'linear or log' })
        .optional()
        .describe('Uniform in the value (linear, default) or in its logarithm.'),
      steps: steps.optional(),
      unit: unit.optional(),
    },
    'a mapping with range',
  ),
  gaussian: mapping(
    { gaussian: pair('[mean, standard deviation]'), unit: unit.optional() },
    'a mapping with gaussian',
  ),
  list: mapping(
    {
      list: z
        .array(number, { error: 'a list of numbers' })
        .min(1, { error: 'at least one value' })
        .max(MOST_VALUES, { error: `at most ${MOST_VALUES} values` })
        .describe('The values; all have the same weight.'),
      unit: unit.optional(),
    },
    'a mapping with list',
  ),
} as const;

/** A number in the input's own unit, or with its unit. */
export const value = z.union([number, mapping({ value: number, unit }, '{ value, unit }')], {
  error: 'a number or { value: ..., unit: ... }',
});

const LOOPS = [1, 2, 3] as const;
export const running = mapping(
  {
    loops: z
      .union(
        LOOPS.map((loops) => z.literal(loops)),
        { error: '1, 2 or 3' },
      )
      .optional()
      .describe('Order of the beta functions. Default 3.'),
    tolerance: number
      .min(1e-13, { error: 'at least 1e-13' })
      .max(1e-3, { error: 'at most 1e-3' })
      .optional()
      .describe('Wanted relative error of the couplings, dimensionless. Default 1e-9.'),
  },
  'a mapping with loops and tolerance',
).describe('How couplings are run.');

/** Options of a model or a constraint, as its catalogue declares them. */
export function optionsOf(specs: Readonly<Record<string, OptionSpec>>): z.ZodObject {
  const shape = Object.fromEntries(
    Object.entries(specs).map(([key, spec]) => [key, optionOf(spec).optional()]),
  );
  return mapping(shape, 'a mapping of options');
}

function optionOf(spec: OptionSpec): z.ZodType {
  if (spec.kind === 'choice') {
    return z
      .enum(spec.values, { error: oneOf(spec.values) })
      .describe(`${spec.meaning}. Default ${spec.default}.`);
  }
  const [low, high] = spec.range;
  const error = `a number from ${low} to ${high}${spec.unit === '1' ? '' : ` ${spec.unit}`}`;
  return z
    .number({ error })
    .min(low, { error })
    .max(high, { error })
    .describe(`${spec.meaning}. Default ${spec.default}.`);
}

/** One stratum; `vary` is left to the reader of axes. */
export const sample = { method: method.optional(), points: points.optional() };
export const stratum = { name: name.optional(), ...sample };

export const expression = z
  .string({ error: 'an expression, e.g. Mt / Mh' })
  .describe(
    'Arithmetic over inputs and other definitions: + - * / ^, sqrt exp log log10 abs min max, comparisons.',
  );

export const DEFINED_NAME = /^[A-Za-z][A-Za-z0-9]{0,39}$/;

/** What an editor shows about an input. */
export function aboutInput(input: InputSpec): string {
  const unitText = input.unit === '1' ? '' : ` ${input.unit}`;
  const error = input.uncertainty === null ? '' : ` +- ${input.uncertainty}`;
  const [low, high] = input.domain;
  return `${input.meaning}. Default ${input.default}${error}${unitText}; allowed ${low} to ${high}${unitText}.`;
}

/** The keys of a scan file. */
export const SECTIONS: readonly string[] = [
  'title',
  'model',
  'seed',
  'sample',
  'vary',
  'fix',
  'define',
  'running',
  'require',
  'note',
  'keep',
];
