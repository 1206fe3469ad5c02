import type {
  Block,
  InputSpec,
  Model,
  Module,
  PointsBlock,
  QuantitySpec,
  ResultBlock,
  Task,
} from './contract.js';
import { compile } from './expressions/compile.js';
import type { Compiled } from './expressions/compile.js';
import { judgeBlock } from './judge.js';
import type { ConstraintInUse } from './judge.js';

const DOMAIN = 1;
const NOT_FINITE = 4;

/** Evaluates `count` points from `first` of `points` and writes their rows of `into`. */
export type Pipeline = (points: PointsBlock, first: number, count: number, into: ResultBlock) => void;

/** Inputs and definitions, then modules, then constraints, for one block of points at a time. */
export function createPipeline(task: Task, model: Model, uses: readonly ConstraintInUse[]): Pipeline {
  const modules = model.modules(task.running, task.model.options);
  const definitions = task.define.map(({ name, expression }) => ({ name, compiled: compile(expression) }));
  const blocks = new Map<number, Block>();
  return (points, first, count, into) => {
    const block = blocks.get(count) ?? createBlock(task, count);
    blocks.set(count, block);
    fillInputs(block, task, points, first);
    definitions.forEach(({ name, compiled }) => define(block, name, compiled));
    checkDomain(block, model.inputs);
    runModules(block, modules);
    writeQuantities(block, task.keep, first, into);
    judgeBlock(block, uses, task.deciding, first, into);
  };
}

/** Columns are reused: a constant input is written once, everything else anew for each block. */
function createBlock(task: Task, count: number): Block {
  const columns = new Map<string, Float64Array>();
  for (const [name, value] of Object.entries(task.fixed))
    columns.set(name, new Float64Array(count).fill(value));
  for (const name of task.varied) columns.set(name, new Float64Array(count));
  for (const { name } of task.define) columns.set(name, new Float64Array(count));
  return { count, columns, failure: new Uint8Array(count) };
}

function fillInputs(block: Block, task: Task, points: PointsBlock, first: number): void {
  block.failure.fill(0);
  task.varied.forEach((name, k) => {
    const start = k * points.count + first;
    block.columns.get(name)!.set(points.values.subarray(start, start + block.count));
  });
}

function define(block: Block, name: string, compiled: Compiled): void {
  compiled.evaluate(block.columns, block.count, block.columns.get(name)!);
}

function checkDomain(block: Block, inputs: readonly InputSpec[]): void {
  for (const { name, domain } of inputs) {
    const values = block.columns.get(name);
    if (!values) throw new Error(`expected a value for the input ${name} in the task, found none`);
    for (let i = 0; i < block.count; i++) {
      if (!(values[i] >= domain[0] && values[i] <= domain[1])) block.failure[i] = DOMAIN;
    }
  }
}

function runModules(block: Block, modules: readonly Module[]): void {
  for (const module of modules) {
    module.evaluate(block);
    for (const spec of module.gives) checkFinite(block, spec);
  }
}

/** A number that must be there and is not fails the point; so does an infinite one. */
function checkFinite(block: Block, { name, absent }: QuantitySpec): void {
  const values = block.columns.get(name)!;
  for (let i = 0; i < block.count; i++) {
    if (block.failure[i] !== 0 || isFinite(values[i])) continue;
    if (absent === undefined || !Number.isNaN(values[i])) {
      values[i] = NaN;
      block.failure[i] = NOT_FINITE;
    }
  }
}

function writeQuantities(block: Block, keep: readonly string[], first: number, into: ResultBlock): void {
  keep.forEach((name, k) => {
    const values = block.columns.get(name);
    if (!values) throw new Error(`expected a quantity of the model or a definition to keep, found ${name}`);
    into.quantities.set(values, k * into.count + first);
  });
  into.failures.set(block.failure, first);
}
