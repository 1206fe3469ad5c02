import type { PointFacts } from '../commands/commands.js';
import { value, withUnit } from './numbers.js';
import { table } from './table.js';

export function pointText(facts: PointFacts): string {
  const inputs = Object.entries(facts.inputs).map(([name, x]) => [name, value(x.value), unit(x.unit)]);
  return [
    `${facts.model}: ${facts.verdict}${facts.reason === null ? '' : ` (${facts.reason})`}`,
    table(['input', 'value', 'unit'], inputs),
    couplingsText(facts),
    quantitiesText(facts),
    constraintsText(facts),
    `fingerprint  ${facts.fingerprint}`,
  ].join('\n\n');
}

function couplingsText({ couplings }: PointFacts): string {
  const names = Object.keys(couplings[0].values);
  const head = [
    'coupling',
    ...couplings.map(({ at, scale }) => `${at} (${withUnit(scale.value, scale.unit)})`),
  ];
  const rows = names.map((name) => [name, ...couplings.map(({ values }) => value(values[name]))]);
  return table(head, rows);
}

function quantitiesText({ quantities }: PointFacts): string {
  const rows = Object.entries(quantities).map(([name, q]) => [
    name,
    q.label ?? value(q.value),
    unit(q.unit),
    q.value === null ? (q.absent ?? '') : (q.caution ?? ''),
  ]);
  return table(['quantity', 'value', 'unit', ''], rows);
}

function constraintsText({ constraints }: PointFacts): string {
  const rows = Object.entries(constraints).map(([name, c]) => [
    name,
    c.deciding ? 'decides' : 'noted',
    c.outcome,
    value(c.margin),
    value(c.logLikelihood),
    c.detail,
  ]);
  return table(['constraint', '', 'outcome', 'margin', 'ln L', ''], rows);
}

function unit(text: string): string {
  return text === '1' ? '' : text;
}
