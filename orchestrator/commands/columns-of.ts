import type { ConstraintUse, QuantitySpec } from '../../workers/contract.js';
import { OUTCOMES } from '../../workers/contract.js';
import { models } from '../../workers/models/catalogue.js';
import { quantitiesOf } from '../../workers/quantities.js';
import type { Plan } from '../scan/plan.js';
import type { ColumnKind, ColumnRecord } from '../store/records.js';
import { constraintNamed } from './constraints.js';
import { named } from './named.js';

/** Every column that a run of this plan has beside those of all runs: inputs, definitions, quantities, and three
 *  for each constraint. A definition has the unit of the input that it sets, if it sets one. */
export function columnsOf(plan: Plan): ColumnRecord[] {
  const model = named(models, plan.model.name, 'model', 'a model');
  const inputs = new Map(model.inputs.map((input) => [input.name, input]));
  const quantities = new Map(
    quantitiesOf(model, plan.running, plan.model.options).map((spec) => [spec.name, spec]),
  );
  const defined = new Map(plan.define.map(({ name, expression }) => [name, expression]));
  const kept = plan.keep.map((name) => {
    const expression = defined.get(name);
    if (expression === undefined) return column(quantities.get(name) ?? nameless(name), 'quantity');
    return {
      ...column(inputs.get(name) ?? nameless(name), 'definition'),
      meaning: `${name} = ${expression}`,
    };
  });
  const chosen = [...inputs.values()].filter((input) => !defined.has(input.name));
  return [
    ...chosen.map((input) => column(input, 'input')),
    ...kept,
    ...[...plan.require, ...plan.note].flatMap(constraintColumns),
  ];
}

function column(spec: QuantitySpec, kind: ColumnKind): ColumnRecord {
  const { name, unit, symbol, meaning, absent, labels, caution, logarithmic } = spec;
  return { name, kind, unit, symbol, meaning, absent, labels, caution, logarithmic };
}

function nameless(name: string): QuantitySpec {
  return { name, unit: '1', symbol: `\\mathrm{${name}}`, meaning: name };
}

function constraintColumns(use: ConstraintUse): ColumnRecord[] {
  const { name, title, marginScale } = constraintNamed(use.name);
  const of = (kind: ColumnKind, meaning: string) => ({
    name: `${kind}(${name})`,
    kind,
    unit: '1',
    symbol: `\\mathrm{${kind}}(\\mathrm{${name}})`,
    meaning,
    constraint: name,
  });
  return [
    { ...of('outcome', `${title}: outcome`), labels: OUTCOMES },
    {
      ...of('margin', `${title}: distance to the edge, positive where met, in ${marginScale}`),
      absent: 'not applicable to this point',
    },
    {
      ...of('likelihood', `${title}: logarithm of the likelihood`),
      absent: 'the constraint has no likelihood',
    },
  ];
}
