import type { InputSpec } from '../../workers/contract.js';
import { check } from './check.js';
import type { Path } from './path.js';
import { oneOf, shortNumber } from './phrases.js';
import type { Report } from './report.js';
import { value } from './shape.js';

/** Powers of ten of an eV; the only units that are converted. */
const ENERGIES: Readonly<Record<string, number>> = { eV: 0, keV: 3, MeV: 6, GeV: 9, TeV: 12, PeV: 15 };

/** A number from a scan file, in the unit of its input and inside its domain. */
export function readValue(raw: unknown, input: InputSpec, path: Path, report: Report): number | undefined {
  const found = check(value, raw, path, report);
  if (found === undefined) return undefined;
  if (typeof found === 'number') return requireInDomain(found, input, path, report);
  const convert = readUnit(found.unit, input, [...path, 'unit'], report);
  return convert && requireInDomain(convert(found.value), input, [...path, 'value'], report);
}

/** How numbers given in a unit become numbers in the unit of the input; undefined after complaining.
 *  @param unit undefined means the input's own */
export function readUnit(
  unit: string | undefined,
  input: InputSpec,
  path: Path,
  report: Report,
): ((x: number) => number) | undefined {
  if (unit === undefined || unit === input.unit) return positiveZero;
  if (unit in ENERGIES && input.unit in ENERGIES) {
    const shift = ENERGIES[unit] - ENERGIES[input.unit];
    return (x) => positiveZero(shiftDecimalPoint(x, shift));
  }
  report.value(path, { expected: unitsOf(input), found: report.describe(path, unit) });
  return undefined;
}

function unitsOf(input: InputSpec): string {
  if (input.unit === '1') return `no unit (${input.name} is a pure number)`;
  return input.unit in ENERGIES ? oneOf(Object.keys(ENERGIES)) : input.unit;
}

/** x * 10^shift, rounded once: 0.17257 TeV is exactly the number that 172.57 GeV is. */
function shiftDecimalPoint(x: number, shift: number): number {
  const [digits, exponent = '0'] = String(x).split('e');
  return Number(`${digits}e${Number(exponent) + shift}`);
}

/** A plan has one zero, as canonical JSON does. */
function positiveZero(x: number): number {
  return x === 0 ? 0 : x;
}

export function requireInDomain(x: number, input: InputSpec, path: Path, report: Report): number | undefined {
  const [low, high] = input.domain;
  if (x >= low && x <= high) return positiveZero(x);
  report.value(path, { expected: `${input.name} ${domainText(input)}`, found: withUnit(x, input) });
  return undefined;
}

export function domainText(input: InputSpec): string {
  return `from ${shortNumber(input.domain[0])} to ${withUnit(input.domain[1], input)}`;
}

export function withUnit(x: number, input: InputSpec): string {
  return input.unit === '1' ? shortNumber(x) : `${shortNumber(x)} ${input.unit}`;
}
