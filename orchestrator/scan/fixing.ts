import type { InputSpec } from '../../workers/contract.js';
import { knownInput } from './axes.js';
import { entriesOf } from './entries.js';
import type { Plan } from './plan.js';
import type { Report } from './report.js';
import type { Sampled } from './strata.js';
import { readValue } from './values.js';

/** `fix`, and the default of every other input that no definition sets and that some stratum leaves alone.
 *  Complains where an input is chosen twice. */
export function readFixed(
  raw: unknown,
  inputs: ReadonlyMap<string, InputSpec>,
  sampled: Sampled,
  defined: Plan['define'],
  report: Report,
): Plan['fix'] {
  const given = new Map<string, number>();
  for (const [name, value] of entriesOf(raw, 'a mapping of inputs to numbers', ['fix'], report)) {
    const input = knownInput(name, inputs, ['fix'], report);
    if (!input) continue;
    const found = readValue(value, input, ['fix', name], report);
    if (found !== undefined) given.set(name, found);
    if (isAlwaysVaried(name, sampled)) {
      const expected = `${name} either under vary or under fix`;
      report.key(['fix', name], { expected, found: 'both, and every stratum varies it' });
    }
  }
  const set = new Set(defined.map(({ name }) => name).filter((name) => inputs.has(name)));
  for (const name of set) requireUnchosen(name, given, sampled, report);
  const rest = [...inputs.values()].filter(({ name }) => !set.has(name) && !isAlwaysVaried(name, sampled));
  return Object.fromEntries(rest.map((input) => [input.name, given.get(input.name) ?? input.default]));
}

function isAlwaysVaried(name: string, { strata, everywhere }: Sampled): boolean {
  if (everywhere.has(name)) return true;
  return strata.length > 0 && strata.every(({ vary }) => vary.some(({ input }) => input === name));
}

function requireUnchosen(
  name: string,
  given: ReadonlyMap<string, number>,
  sampled: Sampled,
  report: Report,
): void {
  const elsewhere = [
    ...(sampled.axes.some(({ input }) => input.name === name) ? ['vary'] : []),
    ...(given.has(name) ? ['fix'] : []),
  ];
  for (const section of elsewhere) {
    report.key(['define', name], { expected: `${name} under define or under ${section}`, found: 'both' });
  }
}
