/** How many points a chunk has: about half a second of work, so that little is lost with a worker and little time
 *  goes into messages. Results never depend on it. */

const LEAST = 16;
const MOST = 4096;
const FIRST = 64;
const WANTED_MILLISECONDS = 500;
/** Weight of the latest chunk in the running mean. */
const LATEST = 0.3;

export class ChunkSize {
  /** Milliseconds a point. */
  #cost: number | undefined;

  learn(points: number, milliseconds: number): void {
    const cost = milliseconds / points;
    this.#cost = this.#cost === undefined ? cost : this.#cost + LATEST * (cost - this.#cost);
  }

  /** A power of two, so that chunks fit into segments; small enough that every worker gets some of what is left. */
  next(left: number, capacity: number): number {
    const wanted = this.#cost === undefined ? FIRST : WANTED_MILLISECONDS / Math.max(this.#cost, 1e-6);
    const fair = left / capacity;
    let size = LEAST;
    while (2 * size <= Math.min(wanted, fair, MOST)) size *= 2;
    return size;
  }
}
