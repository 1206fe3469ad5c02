import { addTwoLoops, oneLoop } from './sm-beta-functions.js';
import { addThreeLoops } from './sm-three-loops.js';

/** dy/dt of the state with t = ln(mu/GeV); t itself never enters. */
export type Derivatives = (t: number, y: Float64Array, out: Float64Array) => void;

/** The running at a given number of loops, loop factors included. No allocation. */
export function derivatives(loops: 1 | 2 | 3): Derivatives {
  return loops === 1 ? upToOneLoop : loops === 2 ? upToTwoLoops : upToThreeLoops;
}

function upToOneLoop(_t: number, y: Float64Array, out: Float64Array): void {
  oneLoop(y, out);
}

function upToTwoLoops(_t: number, y: Float64Array, out: Float64Array): void {
  oneLoop(y, out);
  addTwoLoops(y, out);
}

function upToThreeLoops(_t: number, y: Float64Array, out: Float64Array): void {
  oneLoop(y, out);
  addTwoLoops(y, out);
  addThreeLoops(y, out);
}
