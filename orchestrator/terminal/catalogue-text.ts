import type { OptionSpec, QuantitySpec, Source } from '../../workers/contract.js';
import type { BetasFacts } from '../commands/betas.js';
import type { ConstraintFacts, ConstraintsFacts } from '../commands/constraints.js';
import type { ModelFacts, ModelsFacts } from '../commands/models.js';
import { value } from './numbers.js';
import { table } from './table.js';

export function modelsText({ models }: ModelsFacts): string {
  return table(
    ['model', 'title'],
    models.map(({ name, title }) => [name, title]),
  );
}

export function modelText(model: ModelFacts): string {
  const inputs = model.inputs.map((input) => [
    input.name,
    value(input.default),
    input.uncertainty === null ? '' : value(input.uncertainty),
    unit(input.unit),
    input.meaning,
    sourceText(input.source),
  ]);
  return [
    `${model.name}: ${model.title}\n${model.content}`,
    table(['input', 'default', '+-', 'unit', 'meaning', 'source'], inputs),
    optionsText(model.options),
    table(
      ['coupling', 'meaning'],
      model.couplings.map(({ name, meaning }) => [name, meaning]),
    ),
    ...model.modules.map(({ name, gives }) => `module ${name}\n${quantitiesText(gives)}`),
    sourcesText(model.sources),
  ]
    .filter((part) => part !== '')
    .join('\n\n');
}

function quantitiesText(gives: readonly QuantitySpec[]): string {
  return table(
    [],
    gives.map(({ name, unit: of, meaning }) => [`  ${name}`, unit(of), meaning]),
  );
}

export function constraintsText({ constraints }: ConstraintsFacts): string {
  return table(
    ['constraint', 'title'],
    constraints.map(({ name, title }) => [name, title]),
  );
}

export function constraintText({ constraints }: ConstraintsFacts): string {
  return constraints.map(oneConstraint).join('\n\n');
}

function oneConstraint(constraint: ConstraintFacts): string {
  const rows = [
    ['reads', constraint.needs.join(', ')],
    ['formula', constraint.formula],
    ['margin', constraint.marginScale],
    ['validity', constraint.validity],
    ['neglects', constraint.neglects],
  ];
  return [
    `${constraint.name}: ${constraint.title}`,
    table([], rows),
    optionsText(constraint.options),
    sourcesText(constraint.sources),
  ]
    .filter((part) => part !== '')
    .join('\n');
}

function optionsText(options: Readonly<Record<string, OptionSpec>>): string {
  const rows = Object.entries(options).map(([name, spec]) => [
    `option ${name}`,
    spec.kind === 'choice'
      ? spec.values.join(' | ')
      : `${spec.range[0]} to ${spec.range[1]} ${unit(spec.unit)}`.trim(),
    `default ${spec.default}`,
    spec.meaning,
  ]);
  return rows.length === 0 ? '' : table([], rows);
}

export function betasText({ couplings }: BetasFacts): string {
  const rows = Object.entries(couplings).map(([name, beta]) => [
    name,
    value(beta.one_loop),
    value(beta.two_loop),
    value(beta.total),
  ]);
  return table(['d/dt of', 'one loop', 'two loops', 'total'], rows);
}

function sourcesText(sources: readonly Source[]): string {
  return sources.map((source) => `source: ${sourceText(source)}`).join('\n');
}

function sourceText({ text, ref }: Source): string {
  return ref === '' ? text : `${text} (${ref})`;
}

function unit(text: string): string {
  return text === '1' ? '' : text;
}
