import type { CouplingTrace, StoredPoint } from '../../dashboard/commands.js';
import { VERDICTS } from '../../workers/contract.js';
import { exp } from '../../workers/numerics/exp.js';
import { log } from '../../workers/numerics/log.js';
import { canonicalJson } from '../provenance/canonical.js';
import type { Plan } from '../scan/plan.js';
import { readScan } from '../scan/read-scan.js';
import type { AsyncQuestions } from '../store/reading.js';
import type { RunRecord } from '../store/records.js';
import type { PointFacts } from './commands.js';
import { factsOfResult, resultOfPoint } from './evaluate-point.js';
import type { PointQuestion } from './evaluate-point.js';
import { modelNamed } from './models.js';
import { planOf } from './new-run.js';
import { USUAL_STORE } from './read-store.js';
import { resultColumns } from './result-columns.js';
import { quoted } from './shell.js';

/** One stored point evaluated again from its stored inputs; undefined if the run has no such point.
 *  @param store path of the store, for the command line that does the same */
export async function storedPoint(
  questions: AsyncQuestions,
  run: RunRecord,
  stratum: number,
  index: number,
  store = USUAL_STORE,
): Promise<StoredPoint | undefined> {
  const stored = await questions.point(run.id, stratum, index);
  if (stored === undefined) return undefined;
  const plan = planOf(run);
  const question = questionOf(plan, stored);
  const command = commandLine(run, plan, question, store);
  if (VERDICTS[stored.get('verdict') ?? -1] === 'unfinished') {
    // What ended a worker must not end the dashboard: it is not evaluated here.
    const reason = await questions.reason(run.id, stratum, index);
    return {
      facts: unfinished(question, reason),
      command,
      differing: [],
      trace: traceOf(question, new Map(), []),
    };
  }
  const evaluated = resultOfPoint(question);
  const now = resultColumns(evaluated.task, evaluated.result);
  const differing = [...now].filter(([name, x]) => stored.has(name) && !Object.is(stored.get(name), x[0]));
  const facts = factsOfResult(question, evaluated);
  const inputs = new Map(Object.entries(facts.inputs).map(([name, { value }]) => [name, value ?? NaN]));
  return {
    facts,
    command,
    differing: differing.map(([name]) => name),
    trace: traceOf(question, inputs, scalesOf(question, inputs)),
  };
}

function questionOf(plan: Plan, stored: ReadonlyMap<string, number>): PointQuestion {
  const model = modelNamed(plan.model.name);
  const defined = new Set(plan.define.map(({ name }) => name));
  const free = model.inputs.filter((input) => !defined.has(input.name));
  return {
    model,
    options: plan.model.options,
    running: plan.running,
    inputs: Object.fromEntries(free.map(({ name }) => [name, stored.get(name) ?? plan.fix[name]])),
    define: plan.define,
    constraints: [...plan.require, ...plan.note],
    deciding: plan.require.length,
  };
}

/** Definitions and constraints come from the scan file where it still is what the run was judged by, else from the run:
 *  a run that was judged again, and its children, have other requirements than their scan file. */
function commandLine(
  run: RunRecord,
  plan: Plan,
  { model, running, inputs }: PointQuestion,
  store: string,
): string {
  const set = Object.entries(inputs).map(([name, x]) => quoted(`${name}=${x}`));
  const options = Object.entries(plan.model.options).map(([name, x]) => quoted(`${name}=${x}`));
  const place = store === USUAL_STORE ? '' : ` --store ${quoted(store)}`;
  const frame = isJudgedByFile(run, plan) ? `--scan ${quoted(run.scanFile.name)}` : `--run ${run.id}${place}`;
  return [
    `npx trigpoint point ${model.name} --set ${set.join(' ')}`,
    ...(options.length > 0 ? [`--option ${options.join(' ')}`] : []),
    `--loops ${running.loops} --tolerance ${running.tolerance}`,
    frame,
  ].join(' ');
}

function isJudgedByFile({ scanFile }: RunRecord, plan: Plan): boolean {
  if (scanFile.name === '' || scanFile.text === '') return false;
  const frame = ({ model, define, require, note }: Plan) => canonicalJson([model, define, require, note]);
  try {
    return frame(readScan(Buffer.from(scanFile.text), scanFile.name).plan) === frame(plan);
  } catch {
    return false; // written for another version, whose rules were others
  }
}

const SCALES = 60;

/** From the start of the running to the cut-off, evenly in the logarithm. */
function scalesOf({ model }: PointQuestion, inputs: ReadonlyMap<string, number>): number[] {
  const start = model.startScale(inputs);
  const end = inputs.get('cutoff') ?? NaN;
  if (!(start > 0 && end > start)) return [];
  const step = (log(end) - log(start)) / (SCALES - 1);
  const inner = Array.from({ length: SCALES - 2 }, (_, i) => exp(log(start) + (i + 1) * step));
  return [start, ...inner, end];
}

function traceOf(
  { model, running, options }: PointQuestion,
  inputs: ReadonlyMap<string, number>,
  scales: readonly number[],
): CouplingTrace {
  const traced = scales.length === 0 ? [] : model.trace(running, options, inputs, scales);
  const finite = (x: number) => (Number.isFinite(x) ? x : null);
  const values = model.couplings.map((_, k) => traced.map((couplings) => finite(couplings[k])));
  return { scales, couplings: model.couplings, values };
}

function unfinished({ model, inputs }: PointQuestion, reason: string | null): PointFacts {
  const units = new Map(model.inputs.map((input) => [input.name, input.unit]));
  const known = Object.entries(inputs).map(([name, value]) => [
    name,
    { value, unit: units.get(name) ?? '1' },
  ]);
  return {
    format: 1,
    model: model.name,
    inputs: Object.fromEntries(known) as PointFacts['inputs'],
    couplings: [],
    quantities: {},
    constraints: {},
    verdict: 'unfinished',
    reason,
    fingerprint: '',
  };
}
