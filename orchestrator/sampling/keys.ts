import { createHash } from 'node:crypto';
import type { Key } from './philox.js';

/** What a number drawn for one input of one stratum depends on, and nothing else: never the plan's total,
 *  never another stratum or input. */
export interface Place {
  readonly seed: string;
  /** Position of the stratum in the plan. */
  readonly stratum: number;
  readonly generation: number;
  readonly input: string;
}

/** The Philox key of a place: the first 8 bytes of the SHA-256 of its JSON, as two little-endian words.
 *  @param use keeps different needs of one place independent, e.g. "points", "scramble" */
export function keyOf(place: Place, use: string): Key {
  const text = JSON.stringify([place.seed, place.stratum, place.generation, place.input, use]);
  const digest = createHash('sha256').update(text, 'utf8').digest();
  return [digest.readUInt32LE(0), digest.readUInt32LE(4)];
}
