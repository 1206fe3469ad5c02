import type { CheckFacts } from '../commands/commands.js';
import type { Axis, Plan, Stratum } from '../scan/plan.js';
import { bytes, count, duration, value } from './numbers.js';
import { table } from './table.js';

/** A plan and what it will cost, for people. */
export function checkText({ plan, fingerprint, points, estimate }: CheckFacts): string {
  const rows = [
    ['title', plan.title],
    ['model', named(plan.model.name, plan.model.options)],
    ['seed', plan.seed],
    ['running', `${plan.running.loops} loops, tolerance ${plan.running.tolerance}`],
    ['require', uses(plan.require)],
    ['note', uses(plan.note)],
    ['keep', plan.keep.join(', ')],
    ...plan.define.map(({ name, expression }) => ['define', `${name} = ${expression}`]),
    [
      'fixed',
      Object.entries(plan.fix)
        .map(([name, x]) => `${name} = ${value(x)}`)
        .join(', '),
    ],
    ['plan', fingerprint],
  ];
  const cost = `${count(points)} points, about ${duration(estimate.seconds)} and ${bytes(estimate.bytes)} (${estimate.basis})`;
  const remarks = plan.remarks.map((text) => `\nremark: ${text}`).join('');
  return `${table([], rows)}\n\n${plan.strata.map(stratumText).join('\n')}\n\n${cost}${remarks}`;
}

function stratumText(stratum: Stratum, i: number): string {
  const rows = stratum.vary.map((axis) => ['', axis.input, axisText(axis)]);
  const name = stratum.name === `stratum-${i}` ? '' : `, ${stratum.name}`;
  return `stratum ${i}${name}: ${stratum.method}, ${count(stratum.points)} points\n${table([], rows)}`;
}

function axisText(axis: Axis): string {
  if (axis.kind === 'gaussian')
    return `gaussian, mean ${value(axis.mean)}, standard deviation ${value(axis.sigma)}`;
  if (axis.kind === 'list') return `one of ${axis.values.map(value).join(', ')}`;
  const steps = axis.steps === undefined ? '' : `, ${axis.steps} values`;
  return `from ${value(axis.from)} to ${value(axis.to)}, ${axis.scale}${steps}`;
}

function uses(list: Plan['require']): string {
  return list.map(({ name, options }) => named(name, options)).join(', ') || 'none';
}

function named(name: string, options: Readonly<Record<string, string | number>>): string {
  const pairs = Object.entries(options).map(([key, x]) => `${key}: ${x}`);
  return pairs.length === 0 ? name : `${name} (${pairs.join(', ')})`;
}
