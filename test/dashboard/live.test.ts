import { writeFileSync } from 'node:fs';
import { get } from 'node:http';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createLiveRuns, type Moment } from '../../dashboard/live.js';
import { startReader } from '../../orchestrator/store/reader-thread.js';
import type { AsyncQuestions } from '../../orchestrator/store/reading.js';
import { newFolder, planeScan, start } from '../cli/trigpoint.js';
import { dashboardOn } from './served.js';

const folder = newFolder();
const store = join(folder, 'trigpoint.sqlite');
const questions = startReader(store);

/** The real questions, with a tally of how often a run was looked at. */
function tallied(): { questions: AsyncQuestions; looks: () => number } {
  let count = 0;
  const run: AsyncQuestions['run'] = (id) => {
    count++;
    return questions.run(id);
  };
  return { questions: { ...questions, run }, looks: () => count };
}

/** Server-sent events until the server ends the answer. */
function events(address: string): Promise<{ name: string; data: string }[]> {
  return new Promise((resolve, reject) => {
    get(`${address}/runs/1/live`, (response) => {
      let text = '';
      response.setEncoding('utf8').on('data', (piece: string) => (text += piece));
      response.on('end', () =>
        resolve(
          text
            .split('\n\n')
            .map((block) => ({
              name: /^event: (.*)$/m.exec(block)?.[1] ?? '',
              data: [...block.matchAll(/^data: ?(.*)$/gm)].map((line) => line[1]).join('\n'),
            }))
            .filter((event) => event.name !== ''),
        ),
      );
    }).on('error', reject);
  });
}

const pointsIn = (data: string) =>
  Number(/<dt>Points<\/dt>\s*<dd>([\d\u202f]+)/.exec(data)?.[1].replace(/\D/g, ''));

beforeAll(() => {
  writeFileSync(join(folder, 'plane.yaml'), planeScan(30_000));
});
afterAll(() => questions.close());

describe('live updates', () => {
  it('follow a run from its first points to its end, and end themselves', async () => {
    const running = start(['launch', 'plane.yaml', '--workers', '1'], { cwd: folder });
    await running.saying(/points\/s/);
    const dashboard = await dashboardOn(store, 100);
    const told = await events(dashboard.address);
    await running.ended;
    await dashboard.close();
    const progress = told.filter((event) => event.name === 'progress').map((event) => pointsIn(event.data));
    expect(progress.length).toBeGreaterThan(2);
    expect([...progress].sort((a, b) => a - b)).toEqual(progress);
    expect(progress.at(-1)).toBe(30_000);
    expect(told.at(-1)).toEqual({ name: 'done', data: '30000' });
    expect(told.filter((event) => event.name === 'state').map((event) => event.data)).toEqual([
      'The run is being computed.',
      'The run is complete.',
    ]);
  });

  it('of a finished run say so and end at once', async () => {
    const dashboard = await dashboardOn(store);
    const told = await events(dashboard.address);
    await dashboard.close();
    expect(told.map((event) => event.name)).toEqual(['progress', 'state', 'done']);
  });

  it('look once for all who watch, and not at all once the run is over or nobody watches', async () => {
    const { questions: counted, looks } = tallied();
    const live = createLiveRuns(counted, 20);
    const moments: Moment[] = [];
    const fail = (error: unknown) => expect.unreachable(String(error));
    await new Promise<void>((resolve) => {
      for (let i = 0; i < 5; i++) live.watch(1, (moment) => moments.push(moment) === 5 && resolve(), fail);
    });
    expect(looks()).toBe(1);
    expect(live.listeners(1)).toBe(5);
    // A finished run is over: ten intervals later nobody has looked again.
    await new Promise((resolve) => setTimeout(resolve, 200));
    expect(looks()).toBe(1);
    live.close();
  });

  it('look on at a paused run until nobody watches it any more', async () => {
    const other = newFolder();
    writeFileSync(join(other, 'plane.yaml'), planeScan(20_000));
    const running = start(['launch', 'plane.yaml', '--workers', '1'], { cwd: other });
    await running.saying(/points\/s/);
    running.process.kill('SIGINT');
    await running.ended;
    const reader = startReader(join(other, 'trigpoint.sqlite'));
    let looks = 0;
    const counted: AsyncQuestions = { ...reader, run: (id) => (looks++, reader.run(id)) };
    const live = createLiveRuns(counted, 5);
    let stop = (): void => undefined;
    const moment = await new Promise<Moment>((resolve, reject) => {
      stop = live.watch(1, resolve, reject);
    });
    expect(moment.run.state).toBe('paused');
    await expect.poll(() => looks).toBeGreaterThan(2);
    stop();
    await new Promise((resolve) => setTimeout(resolve, 50));
    const after = looks;
    await new Promise((resolve) => setTimeout(resolve, 150));
    expect(looks).toBe(after);
    expect(live.listeners(1)).toBe(0);
    await reader.close();
  });

  it('tell every listener of trouble, so that pages come back later', async () => {
    const reader = startReader(store);
    const live = createLiveRuns(reader, 10);
    await reader.close();
    const error = await new Promise((resolve) => live.watch(1, () => undefined, resolve));
    expect(String(error)).toContain('closed');
    live.close();
  });
});
