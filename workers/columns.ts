import type { Block, QuantitySpec } from './contract.js';

/** Columns a module writes, in the order of its `gives`: the block's own where they exist, else new ones;
 *  filled with NaN, so that what a module does not reach stays absent. */
export function outputs(block: Block, gives: readonly QuantitySpec[]): Float64Array[] {
  return gives.map(({ name }) => {
    const column = block.columns.get(name) ?? new Float64Array(block.count);
    block.columns.set(name, column);
    return column.fill(NaN);
  });
}

/** A column that an earlier module, a definition or an input wrote. */
export function column(block: Block, name: string): Float64Array {
  const found = block.columns.get(name);
  if (!found)
    throw new Error(`expected a column ${name} in the block, found ${[...block.columns.keys()].join(' ')}`);
  return found;
}
