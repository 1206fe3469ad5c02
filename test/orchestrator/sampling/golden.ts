import { readFileSync } from 'node:fs';
import type { Place } from '../../../orchestrator/sampling/keys.js';

type PlaceTuple = readonly [seed: string, stratum: number, generation: number, input: string];

interface Points {
  readonly sobolPlain: { readonly first: number[][]; readonly from100000: number[][] };
  readonly indices: number[];
  readonly sobolScrambled: {
    readonly dimension: number;
    readonly place: PlaceTuple;
    readonly values: number[];
  }[];
  readonly uniform: { readonly place: PlaceTuple; readonly indices: number[]; readonly values: number[] }[];
  readonly latin: { readonly place: PlaceTuple; readonly size: number; readonly values: number[] }[];
}

interface PhiloxCase {
  readonly counter: [number, number, number, number];
  readonly key: [number, number];
  readonly out: number[];
}

function load(file: string): unknown {
  return JSON.parse(readFileSync(new URL(`../../golden/sampling/${file}`, import.meta.url), 'utf8'));
}

/** Written by test/golden/sampling/points.py: SciPy, and the published descriptions computed a second time. */
export const points = load('points.json') as Points;
/** Written by test/golden/sampling/philox.cpp with the authors' own library. */
export const philoxCases = load('philox.json') as PhiloxCase[];

export function placeOf([seed, stratum, generation, input]: PlaceTuple): Place {
  return { seed, stratum, generation, input };
}
