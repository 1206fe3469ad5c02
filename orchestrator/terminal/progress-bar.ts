import type { Progress } from '../commands/commands.js';
import { count, duration, share } from './numbers.js';

/** What a progress bar needs of standard error. */
export interface Screen {
  readonly isTTY?: boolean;
  readonly columns?: number;
  write(text: string): unknown;
}

export interface ProgressBar {
  show(progress: Progress): void;
  /** Leaves the line it was drawn on; safe to call twice. */
  end(): void;
}

/** A bar redrawn in place on a terminal, a plain line now and then elsewhere.
 *  @param now milliseconds; only decides when the next line is due */
export function progressBar(screen: Screen, now: () => number = Date.now): ProgressBar {
  return screen.isTTY ? drawnBar(screen, now) : plainLines(screen, now);
}

const REDRAW_MS = 100;
const LINE_EVERY_MS = 5000;

function drawnBar(screen: Screen, now: () => number): ProgressBar {
  let drawn = -Infinity;
  let last: Progress | undefined;
  const draw = (progress: Progress) => {
    const text = progressText(progress);
    const room = (screen.columns ?? 80) - text.length - 4;
    const bar = room >= 8 ? `${barOf(fraction(progress), Math.min(room, 40))} ` : '';
    screen.write(`\r\x1b[K${bar}${text.slice(0, (screen.columns ?? 80) - 1)}`);
    drawn = now();
    last = undefined;
  };
  return {
    show(progress) {
      if (now() - drawn >= REDRAW_MS) draw(progress);
      else last = progress;
    },
    end() {
      if (last) draw(last);
      if (drawn > -Infinity) screen.write('\n');
      drawn = -Infinity;
    },
  };
}

/** A line every five seconds, and one at every whole tenth of the points. */
function plainLines(screen: Screen, now: () => number): ProgressBar {
  let written = -Infinity;
  let tenth = -1;
  let shown = '';
  return {
    show(progress) {
      const reached = Math.floor(fraction(progress) * 10);
      if (reached === tenth && now() - written < LINE_EVERY_MS) return;
      const text = progressText(progress);
      if (text !== shown) screen.write(`${text}\n`);
      [tenth, written, shown] = [reached, now(), text];
    },
    end() {
      shown = '';
    },
  };
}

function fraction(progress: Progress): number {
  return progress.wanted === 0 ? 1 : Math.min(1, progress.counts.points / progress.wanted);
}

function barOf(part: number, width: number): string {
  const full = Math.floor(part * width);
  return `${'█'.repeat(full)}${'░'.repeat(width - full)}`;
}

/** e.g. "62 %  12,400 of 20,000 points, 312 points/s, 24 s left, 30.6 % surviving". */
export function progressText(progress: Progress): string {
  const { counts, wanted, pointsPerSecond, secondsLeft, retried } = progress;
  const parts = [`${count(counts.points)} of ${count(wanted)} points`];
  if (pointsPerSecond > 0) parts.push(`${count(pointsPerSecond)} points/s`);
  if (secondsLeft !== null && counts.points < wanted) parts.push(`${duration(Math.ceil(secondsLeft))} left`);
  if (counts.points > 0) parts.push(`${share(counts.surviving, counts.points)} surviving`);
  if (counts.failed > 0) parts.push(`${count(counts.failed)} failed`);
  if (retried > 0) parts.push(`${count(retried)} chunks tried again`);
  return `${Math.floor(fraction(progress) * 100)} %  ${parts.join(', ')}`;
}
