import { describe, expect, it } from 'vitest';
import type { Progress } from '../../../orchestrator/commands/commands.js';
import { progressBar } from '../../../orchestrator/terminal/progress-bar.js';

const at = (points: number, more: Partial<Progress> = {}): Progress => ({
  run: 1,
  state: 'running',
  wanted: 20_000,
  counts: { points, surviving: points / 4, excluded: (3 * points) / 4, failed: 0, unfinished: 0 },
  pointsPerSecond: 312.4,
  secondsLeft: 24.2,
  retried: 0,
  workers: [],
  ...more,
});

function bar(screen: { isTTY: boolean; columns?: number }) {
  let time = 0;
  const written: string[] = [];
  const shown = progressBar({ ...screen, write: (text) => written.push(text) }, () => time);
  return { shown, written, wait: (milliseconds: number) => (time += milliseconds) };
}

describe('the progress bar on a terminal', () => {
  it('says points, pace, time left and the surviving share in one line that is drawn again', () => {
    const { shown, written } = bar({ isTTY: true, columns: 140 });
    shown.show(at(12_400));
    expect(written).toEqual([
      `\r\u001b[K${'█'.repeat(24)}${'░'.repeat(16)} 62 %  12,400 of 20,000 points, 312 points/s, 25 s left, 25.0 % surviving`,
    ]);
  });

  it('is drawn ten times a second at most, ends with the latest state and a new line, once', () => {
    const { shown, written, wait } = bar({ isTTY: true, columns: 140 });
    for (let points = 0; points <= 20_000; points += 100) {
      shown.show(at(points));
      wait(10);
    }
    shown.end();
    shown.end();
    expect(written.length).toBeLessThan(24);
    expect(written.at(-2)).toContain('100 %  20,000 of 20,000 points');
    expect(written.filter((text) => text === '\n')).toHaveLength(1);
  });

  it('never wraps, however narrow the terminal', () => {
    for (const columns of [20, 40, 80, 81, 100, 300]) {
      const { shown, written } = bar({ isTTY: true, columns });
      shown.show(at(12_400));
      expect(written[0].slice(4).length).toBeLessThan(columns);
    }
  });
});

describe('progress elsewhere', () => {
  it('is a plain line at every tenth and every five seconds', () => {
    const { shown, written, wait } = bar({ isTTY: false });
    for (let points = 0; points <= 20_000; points += 200) {
      shown.show(at(points));
      wait(20);
    }
    expect(written).toHaveLength(11);
    wait(5000);
    shown.show(at(20_000, { retried: 1 }));
    expect(written.at(-1)).toMatch(/^100 % {2}20,000 of 20,000 points.*1 chunks tried again\n$/);
    expect(written.join('')).not.toMatch(/[\r\u001b]/);
  });
});
