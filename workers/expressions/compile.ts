import { binaryLoops, comparisonLoops, unaryLoops } from './loops.js';
import type { BinaryLoop } from './loops.js';
import { namesOf } from './names.js';
import { parse } from './parse.js';
import type { Expression } from './syntax.js';

export { ExpressionError } from './expression-error.js';

/** An expression ready for many rows. True is 1, false is 0; NaN stands for an absent value. */
export interface Compiled {
  /** Keys of the columns it reads, in the order the text names them first. */
  readonly names: readonly string[];
  /** Where in the text each of `names` stands first. */
  readonly positions: ReadonlyMap<string, number>;
  /** Writes the value of every row into out[0 .. count); a row never depends on another.
   *  @throws RangeError if a column of `names` is missing or shorter than count, or `out` is */
  evaluate(columns: ReadonlyMap<string, Float64Array>, count: number, out: Float64Array): void;
  /** The same for one row. */
  evaluateOne(values: ReadonlyMap<string, number>): number;
}

/** @throws ExpressionError for any mistake in the text */
export function compile(text: string): Compiled {
  const expression = parse(text);
  const positions = namesOf(expression);
  const names = [...positions.keys()];
  const kernel = new KernelBuilder().build(expression, 0);

  function evaluate(columns: ReadonlyMap<string, Float64Array>, count: number, out: Float64Array): void {
    checkLengths(names, columns, count, out);
    for (let start = 0; start < count; start += TILE) {
      const n = Math.min(TILE, count - start);
      const values = kernel({ columns, start, n });
      for (let i = 0; i < n; i++) out[start + i] = values[i];
    }
  }

  function evaluateOne(values: ReadonlyMap<string, number>): number {
    const columns = new Map([...values].map(([name, value]) => [name, Float64Array.of(value)]));
    const out = new Float64Array(1);
    evaluate(columns, 1, out);
    return out[0];
  }

  return { names, positions, evaluate, evaluateOne };
}

/** Rows worked on together: few enough that all intermediate values stay in the first-level cache. */
const TILE = 1024;

interface Tile {
  readonly columns: ReadonlyMap<string, Float64Array>;
  readonly start: number;
  readonly n: number;
}

/** Values of a node on a tile; the array belongs to the node or its column and is read before the next tile. */
type Kernel = (tile: Tile) => Float64Array;

/** Turns nodes into kernels. A node writes to the buffer `slot` and leaves those below it alone. */
class KernelBuilder {
  private readonly buffers: Float64Array[] = [];

  build(node: Expression, slot: number): Kernel {
    switch (node.kind) {
      case 'number':
        return constant(node.value);
      case 'column':
        return column(node.key);
      case 'unary':
        return this.unary(node.operator, node.operand, slot);
      case 'binary':
        return this.fold(binaryLoops[node.operator], [node.left, node.right], slot);
      case 'chain':
        return this.chain(node, slot);
      case 'call':
        return node.name === 'min' || node.name === 'max'
          ? this.fold(binaryLoops[node.name], node.arguments, slot)
          : this.unary(node.name, node.arguments[0], slot);
    }
  }

  private buffer(slot: number): Float64Array {
    while (this.buffers.length <= slot) this.buffers.push(new Float64Array(TILE));
    return this.buffers[slot];
  }

  private unary(operator: keyof typeof unaryLoops, operand: Expression, slot: number): Kernel {
    const inner = this.build(operand, slot);
    const loop = unaryLoops[operator];
    const out = this.buffer(slot);
    return (tile) => {
      loop(inner(tile), out, tile.n);
      return out;
    };
  }

  /** ((a op b) op c) op ... */
  private fold(loop: BinaryLoop, operands: readonly Expression[], slot: number): Kernel {
    const first = this.build(operands[0], slot);
    const rest = operands.slice(1).map((operand) => this.build(operand, slot + 1));
    const out = this.buffer(slot);
    return (tile) => {
      let sofar = first(tile);
      for (const next of rest) {
        loop(sofar, next(tile), out, tile.n);
        sofar = out;
      }
      return out;
    };
  }

  /** Buffers: slot for the conjunction, slot + 1 for one comparison, then the operands. */
  private chain({ operators, operands }: Expression & { kind: 'chain' }, slot: number): Kernel {
    if (operators.length === 1) return this.fold(comparisonLoops[operators[0]], operands, slot);
    const loops = operators.map((operator) => comparisonLoops[operator]);
    const parts = operands.map((operand, i) => this.build(operand, slot + 2 + i));
    const out = this.buffer(slot);
    const one = this.buffer(slot + 1);
    return (tile) => {
      const values = parts.map((part) => part(tile));
      out.fill(1, 0, tile.n);
      loops.forEach((loop, i) => {
        loop(values[i], values[i + 1], one, tile.n);
        binaryLoops.and(out, one, out, tile.n);
      });
      return out;
    };
  }
}

function constant(value: number): Kernel {
  const values = new Float64Array(TILE).fill(value);
  return () => values;
}

function column(key: string): Kernel {
  return ({ columns, start, n }) => found(columns, key).subarray(start, start + n);
}

function found(columns: ReadonlyMap<string, Float64Array>, key: string): Float64Array {
  const values = columns.get(key);
  if (values === undefined) throw new RangeError(`expected a column ${key}, found none`);
  return values;
}

function checkLengths(
  names: readonly string[],
  columns: ReadonlyMap<string, Float64Array>,
  count: number,
  out: Float64Array,
): void {
  const shortest = names.reduce((least, name) => Math.min(least, found(columns, name).length), out.length);
  if (!(shortest >= count)) throw new RangeError(`expected columns of ${count} rows, found ${shortest}`);
}
