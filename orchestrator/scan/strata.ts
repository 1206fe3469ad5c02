import type { InputSpec } from '../../workers/contract.js';
import { gridSize } from '../sampling/grid.js';
import { SOBOL_DIMENSIONS } from '../sampling/sobol.js';
import { readAxes, type AxisNode } from './axes.js';
import { check, mapping, unknownKeys } from './check.js';
import { isMapping } from './entries.js';
import type { Path } from './path.js';
import { quote } from './phrases.js';
import type { Axis, Method, Stratum } from './plan.js';
import type { Report } from './report.js';
import { MOST_POINTS, MOST_STRATA, sample, stratum as stratumShape } from './shape.js';

type Axes = ReadonlyMap<string, AxisNode>;

/** A stratum as written: what it samples with, over which axes. */
interface Draft {
  readonly path: Path;
  readonly name: string;
  readonly method: Method;
  readonly points: number | undefined;
  readonly axes: Axes;
  /** Whether `vary` sections say anything, right or wrong. */
  readonly varies: boolean;
}

export interface Sampled {
  readonly strata: Stratum[];
  /** Every axis of the file that some stratum uses. */
  readonly axes: readonly AxisNode[];
  /** Inputs under the top-level `vary`, which every stratum varies. */
  readonly everywhere: ReadonlySet<string>;
}

/** `sample` and `vary`: one stratum, or a list of strata whose own `vary` merges over the top-level one. */
export function readStrata(
  sections: { sample: unknown; vary: unknown },
  inputs: ReadonlyMap<string, InputSpec>,
  report: Report,
): Sampled {
  const shared = readAxes(sections.vary, inputs, ['vary'], report);
  const written = sizeOf(sections.vary) > 0;
  const read = Array.isArray(sections.sample)
    ? readList(sections.sample, shared, inputs, report)
    : [readOne(sections.sample, shared, report)];
  const drafts = read.flatMap((draft) => (draft ? [{ ...draft, varies: draft.varies || written }] : []));
  requireNames(drafts, report);
  const used = checkUse(drafts, shared, drafts.length === read.length, report);
  const strata = drafts.map((draft) => finish(draft, report));
  requirePossible(strata, report);
  return { strata, axes: used, everywhere: new Set(shared.keys()) };
}

function sizeOf(raw: unknown): number {
  return typeof raw === 'object' && raw !== null ? Object.keys(raw).length : 0;
}

function readOne(raw: unknown, shared: Axes, report: Report): Draft | undefined {
  const shape = mapping(sample, 'a mapping with method and points, or a list of strata');
  const found = check(shape, raw === undefined ? {} : raw, ['sample'], report);
  return found && { path: ['sample'], name: 'stratum-0', ...withMethod(found), axes: shared, varies: false };
}

function readList(
  raw: readonly unknown[],
  shared: Axes,
  inputs: ReadonlyMap<string, InputSpec>,
  report: Report,
): (Draft | undefined)[] {
  if (raw.length > 0 && raw.length <= MOST_STRATA) {
    return raw.map((entry, i) => readStratum(entry, i, shared, inputs, report));
  }
  const expected = `1 to ${MOST_STRATA} strata`;
  report.value(['sample'], { expected, found: report.describe(['sample'], raw) });
  return [undefined];
}

function readStratum(
  raw: unknown,
  i: number,
  shared: Axes,
  inputs: ReadonlyMap<string, InputSpec>,
  report: Report,
): Draft | undefined {
  const path = ['sample', i];
  const { vary, ...rest } = isMapping(raw) ? raw : {};
  const own = readAxes(vary, inputs, [...path, 'vary'], report);
  const [known, unknown] = [true, false].map((is) =>
    Object.entries(rest).filter(([key]) => key in stratumShape === is),
  );
  unknownKeys(
    unknown.map(([key]) => key),
    [...Object.keys(stratumShape), 'vary'],
    path,
    report,
  );
  const shape = mapping(stratumShape, 'a stratum: a mapping with name, method, points and vary');
  const found = check(shape, isMapping(raw) ? Object.fromEntries(known) : raw, path, report);
  const name = found?.name ?? `stratum-${i}`;
  const axes = new Map([...shared, ...own]);
  return found && { path, name, ...withMethod(found), axes, varies: sizeOf(vary) > 0 };
}

function withMethod(found: { method?: Method; points?: number }): {
  method: Method;
  points: number | undefined;
} {
  return { method: found.method ?? 'sobol', points: found.points };
}

function requireNames(drafts: readonly Draft[], report: Report): void {
  const seen = new Set<string>();
  for (const { name, path } of drafts) {
    if (seen.has(name))
      report.value([...path, 'name'], { expected: 'a name of its own', found: `a second ${quote(name)}` });
    seen.add(name);
  }
}

/** What an axis must have depends on the samplers that use it, as far as all are known. Returns the axes in use. */
function checkUse(drafts: readonly Draft[], shared: Axes, complete: boolean, report: Report): AxisNode[] {
  const methods = new Map<AxisNode, Set<Method>>([...shared.values()].map((node) => [node, new Set()]));
  for (const { axes, method } of drafts) {
    for (const node of axes.values()) methods.set(node, (methods.get(node) ?? new Set()).add(method));
  }
  if (complete) for (const [node, by] of methods) checkAxis(node, by, report);
  return [...methods].filter(([, by]) => by.size > 0).map(([node]) => node);
}

function checkAxis({ axis, path, input }: AxisNode, by: ReadonlySet<Method>, report: Report): void {
  if (by.size === 0) {
    report.key(path, {
      expected: 'an axis that some stratum uses',
      found: `${input.name}, which every stratum replaces`,
    });
  }
  if (!axis) return;
  if (by.has('grid') && axis.kind === 'gaussian') {
    report.value(path, { expected: 'range with steps, or list, for a grid', found: 'gaussian' });
  }
  if (axis.kind !== 'range') return;
  if (by.has('grid') && axis.steps === undefined) {
    const hint = 'the number of values, both ends included';
    report.value(path, { expected: 'steps for a grid', found: 'a range without steps', hint });
  }
  if (by.size > 0 && !by.has('grid') && axis.steps !== undefined) {
    const hint = 'steps belong to sample: { method: grid }';
    report.value([...path, 'steps'], {
      expected: `no steps for ${[...by].join(' and ')}`,
      found: String(axis.steps),
      hint,
    });
  }
}

/** A stratum of the plan, as far as its axes are right. */
function finish({ name, method, path, points, axes, varies }: Draft, report: Report): Stratum {
  const vary = [...axes.values()]
    .flatMap(({ axis }) => axis ?? [])
    .map((axis) => (method === 'grid' ? axis : withoutSteps(axis)));
  vary.sort((a, b) => (a.input < b.input ? -1 : 1));
  if (!varies) {
    const at = path.length > 1 ? path : ['vary'];
    report.value(at, { expected: 'at least one input under vary', found: 'none' });
  }
  if (method === 'sobol' && vary.length > SOBOL_DIMENSIONS) {
    const expected = `at most ${SOBOL_DIMENSIONS} inputs for sobol`;
    report.value(path, { expected, found: String(vary.length) });
  }
  if (method === 'grid' && points !== undefined) {
    const hint = 'the steps and lists of a grid say how many points it has';
    report.value([...path, 'points'], { expected: 'no points for a grid', found: String(points), hint });
  }
  const count = method === 'grid' ? gridSize(vary) : (points ?? 10_000);
  return { name, method, generation: 0, points: count, vary };
}

function requirePossible(strata: readonly Stratum[], report: Report): void {
  const total = strata.reduce((sum, { points }) => sum + points, 0);
  if (total <= MOST_POINTS) return;
  report.value(['sample'], { expected: `at most ${MOST_POINTS} points in all`, found: String(total) });
}

function withoutSteps(axis: Axis): Axis {
  if (axis.kind !== 'range') return axis;
  const { input, kind, from, to, scale } = axis;
  return { input, kind, from, to, scale };
}
