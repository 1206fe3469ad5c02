import { ticks as linearTicks } from 'd3-array';
import { scaleLinear, scaleLog } from 'd3-scale';
import { powerOfTen, upright, type Label } from './label.js';

/** A direction of a plot: what it shows, in which unit, from where to where. */
export interface Axis {
  readonly label: Label;
  readonly unit: Label;
  readonly low: number;
  readonly high: number;
  readonly scale: 'linear' | 'log';
  /** For a class: the value i means categories[i]. */
  readonly categories?: readonly string[];
}

export interface Ticks {
  readonly major: readonly { readonly value: number; readonly label: Label }[];
  readonly minor: readonly number[];
  /** Power of ten that the printed numbers are to be multiplied by. */
  readonly factor: number;
}

/** Where a value of the axis lies between two pixels. */
export function placing(axis: Axis, from: number, to: number): (value: number) => number {
  const scale = axis.scale === 'log' ? scaleLog() : scaleLinear();
  return scale.domain([axis.low, axis.high]).range([from, to]);
}

/** Ticks at round values; about `wanted` of them, never more than fit. */
export function ticksOf(axis: Axis, wanted: number): Ticks {
  if (axis.categories) return categoryTicks(axis.categories, axis);
  if (axis.scale === 'log' && axis.high / axis.low >= 10) return logTicks(axis, wanted);
  return roundTicks(axis, wanted);
}

/** The range of an axis around data: a little air on both sides, never empty. */
export function padded(low: number, high: number, scale: 'linear' | 'log'): readonly [number, number] {
  if (!(low <= high)) return scale === 'log' ? [1, 10] : [0, 1];
  if (scale === 'log') {
    const share = low === high ? 2 : (high / low) ** 0.02;
    return [low / share, high * share];
  }
  const air = low === high ? Math.max(Math.abs(low) * 0.05, 1e-12) : (high - low) * 0.02;
  return [low - air, high + air];
}

function categoryTicks(categories: readonly string[], axis: Axis): Ticks {
  const major = categories
    .map((name, value) => ({ value, label: upright(name) }))
    .filter((tick) => tick.value >= axis.low && tick.value <= axis.high);
  return { major, minor: [], factor: 0 };
}

function roundTicks(axis: Axis, wanted: number): Ticks {
  const values = linearTicks(axis.low, axis.high, wanted);
  const largest = Math.max(Math.abs(axis.low), Math.abs(axis.high));
  const exponent = largest > 0 ? Math.floor(Math.log10(largest)) : 0;
  const factor = exponent >= 5 || exponent <= -3 ? exponent : 0;
  const step = values.length > 1 ? (values[1] - values[0]) / 10 ** factor : 1;
  const digits = Math.min(12, Math.max(0, -Math.floor(Math.log10(step) + 1e-9)));
  const major = values.map((value) => ({ value, label: upright(printed(value / 10 ** factor, digits)) }));
  const minor = linearTicks(axis.low, axis.high, wanted * 5);
  return { major, minor: minor.length > 60 ? [] : minor, factor };
}

function printed(value: number, digits: number): string {
  const text = value.toFixed(digits);
  return (Number(text) === 0 ? (0).toFixed(digits) : text).replace('-', '−');
}

function logTicks(axis: Axis, wanted: number): Ticks {
  const first = Math.ceil(Math.log10(axis.low) - 1e-9);
  const last = Math.floor(Math.log10(axis.high) + 1e-9);
  const every = Math.max(1, Math.ceil((last - first + 1) / wanted));
  const plain = first >= -2 && last <= 3;
  const major: { value: number; label: Label }[] = [];
  const minor: number[] = [];
  for (let exponent = first - 1; exponent <= last; exponent++) {
    const value = Number(`1e${exponent}`);
    if (exponent >= first) {
      if (exponent % every === 0) major.push({ value, label: decade(exponent, plain) });
      else minor.push(value);
    }
    if (every > 1) continue;
    for (let digit = 2; digit < 10; digit++) {
      if (value * digit >= axis.low && value * digit <= axis.high) minor.push(value * digit);
    }
  }
  return { major, minor, factor: 0 };
}

function decade(exponent: number, plain: boolean): Label {
  return plain ? upright(String(Number(`1e${exponent}`))) : powerOfTen(exponent);
}
