import type { ChunkResult } from '../store/writing.js';

/** Results that wait to be committed: whole segments as soon as they are there, the rest before it is old. Small
 *  pieces cost the store more than waiting does. */

const SEGMENT = 4096;
const OLD_MILLISECONDS = 800;
/** Bounds the memory. */
const MOST_POINTS = 16 * SEGMENT;

interface Waiting {
  readonly result: ChunkResult;
  readonly since: number;
}

export class Outbox {
  readonly #waiting = new Map<string, Waiting[]>();
  #points = 0;

  /** @param now milliseconds of a clock that never goes back */
  put(result: ChunkResult, now: number): void {
    const segment = `${result.stratum}.${Math.floor(result.first / SEGMENT)}`;
    const group = this.#waiting.get(segment) ?? [];
    group.push({ result, since: now });
    this.#waiting.set(segment, group);
    this.#points += result.count;
  }

  get points(): number {
    return this.#points;
  }

  /** Takes what is worth a commit now. */
  takeRipe(now: number): ChunkResult[] {
    if (this.#points >= MOST_POINTS) return this.takeAll();
    return this.#take((group) => pointsOf(group) >= SEGMENT || now - group[0].since >= OLD_MILLISECONDS);
  }

  takeAll(): ChunkResult[] {
    return this.#take(() => true);
  }

  #take(isRipe: (group: readonly Waiting[]) => boolean): ChunkResult[] {
    const taken: ChunkResult[] = [];
    for (const [segment, group] of this.#waiting) {
      if (!isRipe(group)) continue;
      this.#waiting.delete(segment);
      taken.push(...group.map((waiting) => waiting.result));
    }
    this.#points -= taken.reduce((sum, result) => sum + result.count, 0);
    return taken;
  }
}

function pointsOf(group: readonly Waiting[]): number {
  return group.reduce((sum, { result }) => sum + result.count, 0);
}
