/** One tight loop an operation: a function of its own, so that each is optimised for doubles alone. */
import { exp } from '../numerics/exp.js';
import { log, log10 } from '../numerics/log.js';
import { pow } from '../numerics/pow.js';
import type { BinaryOperator, Comparison, FunctionName } from './syntax.js';

/** Reads n entries of a, writes n entries of out; out may be a. */
export type UnaryLoop = (a: Float64Array, out: Float64Array, n: number) => void;
/** Reads n entries of a and b, writes n entries of out; out may be a or b. */
export type BinaryLoop = (a: Float64Array, b: Float64Array, out: Float64Array, n: number) => void;

/** 1 for what is neither 0 nor absent (NaN). Number(condition) has no branch to mispredict: four times faster. */
function truth(value: number): number {
  return Number(value < 0) + Number(value > 0);
}

export const unaryLoops: Readonly<Record<'-' | 'not' | Exclude<FunctionName, 'min' | 'max'>, UnaryLoop>> = {
  '-': (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = -a[i];
  },
  not: (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = 1 - truth(a[i]);
  },
  sqrt: (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Math.sqrt(a[i]);
  },
  abs: (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Math.abs(a[i]);
  },
  exp: (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = exp(a[i]);
  },
  log: (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = log(a[i]);
  },
  log10: (a, out, n) => {
    for (let i = 0; i < n; i++) out[i] = log10(a[i]);
  },
};

export const binaryLoops: Readonly<Record<BinaryOperator | 'min' | 'max', BinaryLoop>> = {
  '+': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = a[i] + b[i];
  },
  '-': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = a[i] - b[i];
  },
  '*': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = a[i] * b[i];
  },
  '/': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = a[i] / b[i];
  },
  '^': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = pow(a[i], b[i]);
  },
  // Either operand absent makes the result absent.
  min: (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Math.min(a[i], b[i]);
  },
  max: (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Math.max(a[i], b[i]);
  },
  and: (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = truth(a[i]) * truth(b[i]);
  },
  or: (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Math.max(truth(a[i]), truth(b[i]));
  },
};

/** Every comparison with an absent value (NaN) is false, `!=` too. */
export const comparisonLoops: Readonly<Record<Comparison, BinaryLoop>> = {
  '<': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Number(a[i] < b[i]);
  },
  '<=': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Number(a[i] <= b[i]);
  },
  '>': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Number(a[i] > b[i]);
  },
  '>=': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Number(a[i] >= b[i]);
  },
  '==': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Number(a[i] === b[i]);
  },
  '!=': (a, b, out, n) => {
    for (let i = 0; i < n; i++) out[i] = Number(a[i] < b[i]) + Number(a[i] > b[i]);
  },
};
