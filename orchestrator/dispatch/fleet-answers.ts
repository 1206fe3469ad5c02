import type { Redis } from 'ioredis';
import { answerFields, answerOf, type Answer } from './fleet-messages.js';

/** Answers travel in a stream of their own: binary, and gone once read. A queue's return values are JSON and stay. */

/** An unread stream vanishes by itself. */
const KEPT_SECONDS = 3600;
const BLOCK_MILLISECONDS = 1000;
const AT_ONCE = 16;
const AFTER_ERROR_MILLISECONDS = 500;

type Entry = readonly [id: Buffer, fields: readonly Buffer[]];

export async function sendAnswer(redis: Redis, scope: string, answer: Answer): Promise<void> {
  const key = keyOf(scope);
  await redis
    .multi()
    .xadd(key, '*', ...answerFields(answer))
    .expire(key, KEPT_SECONDS)
    .exec();
}

/** Hands over answers as they come; an answer that was handed over is removed from the stream. */
export class AnswerReader {
  readonly #redis: Redis;
  readonly #key: string;
  #running = true;

  constructor(
    redis: Redis,
    scope: string,
    private readonly receive: (answer: Answer) => void,
  ) {
    this.#redis = redis.duplicate();
    this.#redis.on('error', () => undefined);
    this.#key = keyOf(scope);
  }

  /** Forgets answers to an earlier coordinator of this scope and begins. */
  async start(): Promise<void> {
    await this.#redis.del(this.#key);
    void this.#read();
  }

  stop(): void {
    this.#running = false;
    this.#redis.disconnect();
  }

  async #read(): Promise<void> {
    while (this.#running) {
      try {
        await this.#takeOver(await this.#next());
      } catch (error) {
        // A server that restarts or loads its data: ask again. The one that stays away is noticed elsewhere.
        if (!this.#running) return;
        void error;
        await new Promise((resolve) => setTimeout(resolve, AFTER_ERROR_MILLISECONDS));
      }
    }
  }

  /** From the beginning, for what was read is gone. */
  async #next(): Promise<readonly Entry[]> {
    const arrived = await this.#redis.xreadBuffer(
      'COUNT',
      AT_ONCE,
      'BLOCK',
      BLOCK_MILLISECONDS,
      'STREAMS',
      this.#key,
      '0',
    );
    return arrived?.[0]?.[1] ?? [];
  }

  async #takeOver(entries: readonly Entry[]): Promise<void> {
    if (entries.length === 0) return;
    for (const [, fields] of entries) {
      const answer = answerOf(fields);
      if (answer && this.#running) this.receive(answer);
    }
    await this.#redis.xdel(this.#key, ...entries.map(([id]) => id));
  }
}

function keyOf(scope: string): string {
  return `trigpoint-results:${scope}`;
}
