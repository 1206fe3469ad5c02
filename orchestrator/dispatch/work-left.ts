import { endOf, subtractSpans } from '../store/spans.js';
import type { Span } from '../store/writing.js';
import type { LossReason } from './dispatcher.js';

/** Consecutive points that are to be dispatched as one chunk. */
export interface Portion extends Span {
  /** Workers that were lost with exactly these points. */
  readonly losses: number;
  /** Half of a portion that was lost before: one more loss and it is halved again. */
  readonly suspect: boolean;
  /** To be worked on while nothing else is: whoever dies then, dies of it. */
  readonly alone: boolean;
}

/** A point that no worker could do. */
export interface GivenUp {
  readonly stratum: number;
  readonly index: number;
  readonly reason: string;
}

/** Losses after which a chunk is halved, and a single point given up. */
const HALVE_AFTER = 2;
const GIVE_UP_AFTER = 3;
/** Chunks never cross a multiple of this: points that are stored together. */
const SEGMENT = 4096;

/** What of a run is still to be dispatched. Portions that came back go first; a portion that keeps losing its workers
 *  is halved until the one point to blame is found. */
export class WorkLeft {
  /** Points nobody has yet, in order; the first span is being cut up. */
  readonly #fresh: Span[];
  readonly #again: Portion[] = [];
  readonly #givenUp: GivenUp[] = [];
  #points: number;

  /** @param open     spans that are not committed, in order
   *  @param recorded attempts of an earlier coordinator at points among them, which ended with its death */
  constructor(open: readonly Span[], recorded: readonly (Span & { readonly attempts: number })[]) {
    this.#points = open.reduce((sum, span) => sum + span.count, 0);
    const attempts = new Map(recorded.map((span) => [keyOf(span), span.attempts]));
    const tried = outermost(recorded);
    this.#fresh = open.flatMap((span) => subtractSpans(span, tried));
    for (const span of tried) this.#resume(span, open, attempts, false);
  }

  /** Points that are neither done nor in flight. */
  get points(): number {
    return this.#points;
  }

  /** Takes the next portion, of about `size` points if nobody had it before; undefined if nothing is left. */
  take(size: number): Portion | undefined {
    const portion = this.#again.shift() ?? this.#cut(size);
    if (portion) this.#points -= portion.count;
    return portion;
  }

  /** The next portion must be worked on alone. */
  get nextIsAlone(): boolean {
    return this.#again[0]?.alone ?? false;
  }

  /** A portion that was not worked on. */
  returned(portion: Portion): void {
    this.#points += portion.count;
    this.#again.push(portion);
  }

  /** A portion whose worker was lost. */
  lost(portion: Portion, reason: LossReason, detail: string): void {
    this.#points += portion.count;
    const losses = portion.losses + 1;
    // Other reasons than a death are certainly about this portion.
    const alone = reason === 'worker-died' && portion.count === 1 && losses === GIVE_UP_AFTER - 1;
    this.#tryAgain({ ...portion, losses, alone }, `${reason}: ${detail}`);
  }

  /** Points given up since this was asked last. */
  takeGivenUp(): GivenUp[] {
    return this.#givenUp.splice(0);
  }

  #cut(size: number): Portion | undefined {
    const span = this.#fresh[0];
    if (!span) return undefined;
    const step = Math.min(size, SEGMENT);
    const end = Math.min(endOf(span), (Math.floor(span.first / step) + 1) * step);
    if (end === endOf(span)) this.#fresh.shift();
    else this.#fresh[0] = { ...span, first: end, count: endOf(span) - end };
    return { ...span, count: end - span.first, losses: 0, suspect: false, alone: false };
  }

  #tryAgain(portion: Portion, reason: string): void {
    if (!isExhausted(portion)) return void this.#again.push(portion);
    if (portion.count > 1) return halves(portion).forEach((half) => this.#again.push(asSuspect(half)));
    this.#points -= 1;
    this.#givenUp.push({ stratum: portion.stratum, index: portion.first, reason });
  }

  /** Goes on where an earlier coordinator died: with the same portions, one at a time, for one of them may have
   *  killed it. */
  #resume(span: Span, open: readonly Span[], attempts: ReadonlyMap<string, number>, suspect: boolean): void {
    const losses = attempts.get(keyOf(span)) ?? 0;
    const portion = { ...span, losses, suspect, alone: true };
    const left = missingOf(span, open);
    if (left.length === 0) return;
    if (isExhausted(portion) && span.count > 1)
      return halves(span).forEach((half) => this.#resume(half, open, attempts, true));
    if (left[0].count === span.count)
      return this.#tryAgain(portion, 'worker-died: the whole program died with it');
    for (const part of left) this.#again.push({ ...asSuspect(part), alone: true });
  }
}

function isExhausted({ count, losses, suspect }: Portion): boolean {
  if (count === 1) return losses >= GIVE_UP_AFTER;
  return losses >= (suspect ? 1 : HALVE_AFTER);
}

function halves({ stratum, first, count }: Span): [Span, Span] {
  const half = Math.ceil(count / 2);
  return [
    { stratum, first, count: half },
    { stratum, first: first + half, count: count - half },
  ];
}

function asSuspect(span: Span): Portion {
  return { ...span, losses: 0, suspect: true, alone: false };
}

/** What of a span is open. */
function missingOf(span: Span, open: readonly Span[]): Span[] {
  return subtractSpans(span, subtractSpans(span, open));
}

/** Spans that lie in no other; where two overlap otherwise, the second keeps its own points only. */
function outermost(spans: readonly Span[]): Span[] {
  const sorted = [...spans].sort((a, b) => a.stratum - b.stratum || a.first - b.first || b.count - a.count);
  const found: Span[] = [];
  for (const { stratum, first, count } of sorted)
    found.push(...subtractSpans({ stratum, first, count }, found));
  return found;
}

function keyOf({ stratum, first, count }: Span): string {
  return `${stratum}.${first}.${count}`;
}
