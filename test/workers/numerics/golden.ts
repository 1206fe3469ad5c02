import { readFileSync } from 'node:fs';

/** A line of test/golden/numerics/*.txt: see functions.py there. */
export interface Golden {
  readonly arguments: readonly number[];
  readonly rounded: number;
  /** The exact value minus the rounded one, in units in the last place of the rounded one. */
  readonly offset: number;
}

export function readGolden(name: string): Golden[] {
  const text = readFileSync(new URL(`../../golden/numerics/${name}.txt`, import.meta.url), 'utf8');
  return text.trimEnd().split('\n').map(parsed);
}

/** Distance of a result from the exact value in units in the last place. */
export function ulpsOff(result: number, { rounded, offset }: Golden): number {
  if (Object.is(result, rounded)) return Math.abs(offset);
  return Math.abs((result - rounded) / ulp(rounded) - offset);
}

/** The largest distance over a golden file, with the arguments where it occurs. */
export function worst(name: string, f: (...x: number[]) => number): { ulps: number; at: readonly number[] } {
  let [ulps, at] = [-1, [] as readonly number[]];
  for (const golden of readGolden(name)) {
    const off = ulpsOff(f(...golden.arguments), golden);
    if (!(off <= ulps)) [ulps, at] = [off, golden.arguments];
  }
  return { ulps, at };
}

/** Distance from |x| to the next larger float64. */
export function ulp(x: number): number {
  const bits = new BigUint64Array(new Float64Array([Math.abs(x)]).buffer);
  bits[0] += 1n;
  return new Float64Array(bits.buffer)[0] - Math.abs(x);
}

function parsed(line: string): Golden {
  const words = line.split(' ');
  const offset = Number(words.pop());
  const numbers = words.map(fromHex);
  return { arguments: numbers.slice(0, -1), rounded: numbers[numbers.length - 1], offset };
}

function fromHex(hex: string): number {
  return new Float64Array(new BigUint64Array([BigInt(`0x${hex}`)]).buffer)[0];
}
