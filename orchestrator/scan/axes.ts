import type { InputSpec } from '../../workers/contract.js';
import { check, unknownKeys } from './check.js';
import { entriesOf, isMapping } from './entries.js';
import type { Path } from './path.js';
import { didYouMean, oneOf } from './phrases.js';
import type { Axis } from './plan.js';
import type { Report } from './report.js';
import { AXES } from './shape.js';
import { domainText, readUnit, requireInDomain, withUnit } from './values.js';

type Kind = keyof typeof AXES;
type Convert = (x: number) => number;
const KINDS = Object.keys(AXES) as Kind[];

/** The smallest probability a sampler draws, 2^-53, lies 8.21 standard deviations out. */
const REACH = 8.3;

/** One input under `vary`. */
export interface AxisNode {
  readonly path: Path;
  readonly input: InputSpec;
  /** Undefined after complaining. */
  readonly axis: Axis | undefined;
}

/** A `vary` mapping, input by input. */
export function readAxes(
  raw: unknown,
  inputs: ReadonlyMap<string, InputSpec>,
  path: Path,
  report: Report,
): Map<string, AxisNode> {
  const axes = new Map<string, AxisNode>();
  for (const [name, value] of entriesOf(raw, 'a mapping of inputs', path, report)) {
    const input = knownInput(name, inputs, path, report);
    const at = [...path, name];
    if (input) axes.set(name, { path: at, input, axis: readAxis(value, input, at, report) });
    else checkShape(value, at, report);
  }
  return axes;
}

export function knownInput(
  name: string,
  inputs: ReadonlyMap<string, InputSpec>,
  path: Path,
  report: Report,
): InputSpec | undefined {
  const input = inputs.get(name);
  if (!input) unknownKeys([name], [...inputs.keys()], path, report);
  return input;
}

/** What can be said about an axis of an unknown input. */
function checkShape(raw: unknown, path: Path, report: Report): void {
  const kind = kindOf(raw, path, report);
  if (kind) check<unknown>(AXES[kind], raw, path, report);
}

function readAxis(raw: unknown, input: InputSpec, path: Path, report: Report): Axis | undefined {
  const kind = kindOf(raw, path, report);
  if (kind === 'range') return readRange(raw, input, path, report);
  if (kind === 'gaussian') return readGaussian(raw, input, path, report);
  return kind === 'list' ? readList(raw, input, path, report) : undefined;
}

function kindOf(raw: unknown, path: Path, report: Report): Kind | undefined {
  if (!isMapping(raw)) {
    const hint = typeof raw === 'number' ? 'a single value belongs under fix' : undefined;
    const pair = Array.isArray(raw) ? `write { range: ${JSON.stringify(raw).slice(0, 60)} }` : hint;
    const expected = 'a mapping with range, gaussian or list';
    report.value(path, { expected, found: report.describe(path, raw), ...(pair ? { hint: pair } : {}) });
    return undefined;
  }
  const kinds = KINDS.filter((kind) => kind in raw);
  if (kinds.length === 1) return kinds[0];
  if (kinds.length > 1) {
    const expected = `only one of ${oneOf(KINDS)}`;
    report.key([...path, kinds[1]], { expected, found: kinds.join(' and ') });
    return undefined;
  }
  noKind(raw, path, report);
  return undefined;
}

function noKind(raw: object, path: Path, report: Report): void {
  const known = ['range', 'gaussian', 'list', 'scale', 'steps', 'unit'];
  const unknown = Object.keys(raw).filter((key) => !known.includes(key));
  unknownKeys(unknown, known, path, report);
  if (unknown.some((key) => didYouMean(key, KINDS))) return;
  report.value(path, { expected: oneOf(KINDS), found: report.describe(path, raw) });
}

function readRange(raw: unknown, input: InputSpec, path: Path, report: Report): Axis | undefined {
  const found = check(AXES.range, raw, path, report);
  const convert = found && readUnit(found.unit, input, [...path, 'unit'], report);
  if (!convert) return undefined;
  const [from, to] = readNumbers(found.range, convert, input, [...path, 'range'], report);
  if (from === undefined || to === undefined) return undefined;
  const scale = found.scale ?? 'linear';
  const complaint = from < to ? undefined : notRising(from, to, input);
  if (complaint) report.value([...path, 'range'], complaint);
  const logFrom = scale === 'log' && Math.min(from, to) <= 0;
  if (logFrom) {
    const at = from <= 0 ? 0 : 1;
    report.value([...path, 'range', at], {
      expected: 'a positive number for scale: log',
      found: withUnit(at ? to : from, input),
    });
  }
  if (complaint || logFrom) return undefined;
  return {
    input: input.name,
    kind: 'range',
    from,
    to,
    scale,
    ...(found.steps ? { steps: found.steps } : {}),
  };
}

function notRising(
  from: number,
  to: number,
  input: InputSpec,
): { expected: string; found: string; hint: string } {
  const found = `[${from}, ${to}]`;
  if (from > to)
    return { expected: 'a range [from, to] that rises', found, hint: `did you mean [${to}, ${from}]?` };
  const hint = `a single value belongs under fix: ${input.name}: ${from}`;
  return { expected: 'a range [from, to] that is not empty', found, hint };
}

function readGaussian(raw: unknown, input: InputSpec, path: Path, report: Report): Axis | undefined {
  const found = check(AXES.gaussian, raw, path, report);
  const convert = found && readUnit(found.unit, input, [...path, 'unit'], report);
  if (!convert) return undefined;
  const mean = requireInDomain(convert(found.gaussian[0]), input, [...path, 'gaussian', 0], report);
  const sigma = convert(found.gaussian[1]);
  if (sigma <= 0) {
    report.value([...path, 'gaussian', 1], {
      expected: 'a positive standard deviation',
      found: withUnit(sigma, input),
    });
    return undefined;
  }
  if (mean === undefined) return undefined;
  const [low, high] = [mean - REACH * sigma, mean + REACH * sigma];
  if (low >= input.domain[0] && high <= input.domain[1])
    return { input: input.name, kind: 'gaussian', mean, sigma };
  report.value([...path, 'gaussian'], {
    expected: `a distribution within ${input.name} ${domainText(input)} up to ${REACH} standard deviations`,
    found: `${low} to ${withUnit(high, input)}`,
    hint: 'a smaller standard deviation or a range fits',
  });
  return undefined;
}

function readList(raw: unknown, input: InputSpec, path: Path, report: Report): Axis | undefined {
  const found = check(AXES.list, raw, path, report);
  const convert = found && readUnit(found.unit, input, [...path, 'unit'], report);
  if (!convert) return undefined;
  const at = [...path, 'list'];
  const values = readNumbers(found.list, convert, input, at, report);
  if (values.includes(undefined)) return undefined;
  const seen = new Set<number | undefined>();
  values.forEach((x, i) => {
    if (seen.has(x)) report.value([...at, i], { expected: 'every value once', found: `a second ${x}` });
    seen.add(x);
  });
  const sorted = (values as number[]).sort((a, b) => a - b);
  return { input: input.name, kind: 'list', values: sorted };
}

function readNumbers(
  numbers: readonly number[],
  convert: Convert,
  input: InputSpec,
  path: Path,
  report: Report,
): (number | undefined)[] {
  return numbers.map((x, i) => requireInDomain(convert(x), input, [...path, i], report));
}
