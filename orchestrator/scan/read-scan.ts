import type { RunningSettings } from '../../workers/contract.js';
import { constraints } from '../../workers/constraints/catalogue.js';
import { models } from '../../workers/models/catalogue.js';
import { quantitiesOf } from '../../workers/quantities.js';
import { check, unknownKeys } from './check.js';
import { readDefinitions, type Vocabulary } from './definitions.js';
import { isMapping } from './entries.js';
import { readFixed } from './fixing.js';
import { readJudging, type Judging } from './judging.js';
import { needsOf, readKeep } from './keeping.js';
import { readModel, type ChosenModel } from './model-choice.js';
import type { Plan } from './plan.js';
import { remarksOn } from './remarks.js';
import { Report } from './report.js';
import { running as runningShape, SECTIONS, seed, title } from './shape.js';
import { readStrata } from './strata.js';
import { decode } from './text.js';
import { readTree } from './tree.js';

type Sections = Readonly<Record<string, unknown>>;

/** Reads a scan file: YAML 1.2, of which JSON is a part.
 *  A section without content counts as left out.
 *  @param file its name, for mistakes only: the plan is the same whatever the file is called
 *  @returns the plan with every default filled in (files that mean the same give the same plan), and the text
 *  @throws FileMistakes with every mistake of the file, in its order */
export function readScan(bytes: Uint8Array, file: string): { plan: Plan; text: string } {
  const text = decode(bytes, file);
  const tree = readTree(text, file);
  const report = new Report(file, tree);
  const sections = requireMapping(tree.value, report);
  unknownKeys(
    Object.keys(sections).filter((key) => !SECTIONS.includes(key)),
    SECTIONS,
    [],
    report,
  );
  const plan = readPlan(sections, report);
  report.throwIfAny();
  if (!plan) throw new Error('a scan file without a plan and without a mistake');
  return { plan, text };
}

function requireMapping(value: unknown, report: Report): Sections {
  if (isMapping(value)) {
    return Object.fromEntries(Object.entries(value).filter(([, section]) => section !== null));
  }
  const found = value === undefined || value === null ? 'an empty file' : report.describe([], value);
  report.value([], { expected: 'a scan file: a mapping with model, vary and so on', found });
  report.throwIfAny();
  return {};
}

/** Complains about everything it can; undefined where too little is right to go on. */
function readPlan(sections: Sections, report: Report): Plan | undefined {
  const head = readHead(sections, report);
  const judging = readJudging({ require: sections.require, note: sections.note }, constraints, report);
  const chosen = readModel(sections.model, models, report);
  return chosen && readForModel(sections, chosen, head, judging, report);
}

interface Head {
  readonly title: string | undefined;
  readonly seed: string;
  readonly running: RunningSettings;
}

function readHead(sections: Sections, report: Report): Head {
  const named = sections.title === undefined ? undefined : check(title, sections.title, ['title'], report);
  const seeded = sections.seed === undefined ? '1' : check(seed, sections.seed, ['seed'], report);
  const settings = check(
    runningShape,
    sections.running === undefined ? {} : sections.running,
    ['running'],
    report,
  );
  const running = { loops: settings?.loops ?? 3, tolerance: settings?.tolerance ?? 1e-9 };
  return { title: named, seed: String(seeded), running };
}

function readForModel(
  sections: Sections,
  { model, options }: ChosenModel,
  { title: named, seed: seeded, running }: Head,
  { require, note }: Judging,
  report: Report,
): Plan {
  const inputs = new Map(model.inputs.map((input) => [input.name, input]));
  const quantities = quantitiesOf(model, running, options).map(({ name }) => name);
  const words: Vocabulary = { inputs: new Set(inputs.keys()), quantities: new Set(quantities) };
  const sampled = readStrata({ sample: sections.sample, vary: sections.vary }, inputs, report);
  const define = readDefinitions(sections.define, words, report);
  const fix = readFixed(sections.fix, inputs, sampled, define, report);
  const needed = [
    ...needsOf('require', require, constraints, words, report),
    ...needsOf('note', note, constraints, words, report),
  ];
  const keep = readKeep(sections.keep, words, define, needed, report);
  const plan = {
    format: 1 as const,
    title: named ?? `Scan of ${model.name}`,
    model: { name: model.name, options },
    seed: seeded,
    strata: sampled.strata,
    fix,
    define,
    running,
    require,
    note,
    keep,
  };
  return { ...plan, remarks: report.clean ? remarksOn(plan, model, constraints) : [] };
}
