import { describe, expect, it } from 'vitest';
import { Broken, UserMistake } from '../../../orchestrator/mistakes.js';
import { openForWriting } from '../../../orchestrator/store/open.js';
import { questionsOf } from '../../../orchestrator/store/questions.js';
import { startReader } from '../../../orchestrator/store/reader-thread.js';
import { exampleChunk, exampleRun, fillRun, newFile } from './example.js';

describe('the reader thread', () => {
  it('gives the same answers as questions asked directly', async () => {
    const path = newFile();
    const store = openForWriting(path);
    const { run } = fillRun(store);
    const direct = questionsOf(store);
    const reader = startReader(path);
    const view = { run, where: 'Mt > 170' };
    const x = { column: 'Mt', scale: 'linear', range: null } as const;
    const y = { column: 'Mh', scale: 'linear', range: null } as const;
    expect(await reader.runs()).toEqual(store.runs());
    expect(await reader.run(run)).toEqual(store.run(run));
    expect(await reader.run(99)).toBeUndefined();
    expect(await reader.columns(run)).toEqual(store.columns(run));
    expect(await reader.constraints(run)).toEqual(store.constraints(run));
    expect(await reader.chunks(run)).toEqual(store.chunks(run));
    expect(await reader.reason(run, 0, 7)).toEqual(store.reason(run, 0, 7));
    expect(await reader.counts(view)).toEqual(direct.counts(view));
    expect(await reader.page(view, ['Mt'], 5, 5)).toEqual(direct.page(view, ['Mt'], 5, 5));
    expect(await reader.density(view, x, y, 'Mt', [4, 4])).toEqual(direct.density(view, x, y, 'Mt', [4, 4]));
    expect(await reader.scatter(view, 'Mt', 'Mh', null, 9)).toEqual(
      direct.scatter(view, 'Mt', 'Mh', null, 9),
    );
    expect(await reader.cutFlow(view)).toEqual(direct.cutFlow(view));
    expect(await reader.point(run, 0, 3)).toEqual(direct.point(run, 0, 3));
    await reader.close();
    store.close();
  });

  it('sees what is committed while it is open', async () => {
    const path = newFile();
    const store = openForWriting(path);
    const run = store.createRun(exampleRun());
    const reader = startReader(path);
    for (const first of [0, 1000, 2000, 3000, 4000]) {
      store.commit(run, [exampleChunk({ stratum: 0, first, count: 1000 })]);
      expect((await reader.counts({ run, where: '' })).total).toBe(first + 1000);
      expect((await reader.counts({ run, where: 'Mt > 0' })).points).toBe(first + 1000);
    }
    await reader.close();
    store.close();
  });

  it('answers questions in the order they were asked, and goes on after trouble', async () => {
    const path = newFile();
    const store = openForWriting(path);
    const { run } = fillRun(store);
    const reader = startReader(path);
    const order: number[] = [];
    const asked = Array.from({ length: 20 }, async (_, i) => {
      if (i === 5) await expect(reader.counts({ run, where: 'Mt >' })).rejects.toThrow(UserMistake);
      else await reader.counts({ run, where: `Mt > ${160 + i}` });
      order.push(i);
    });
    await Promise.all(asked);
    expect(order).toEqual(Array.from({ length: 20 }, (_, i) => i));
    await reader.close();
    store.close();
  });

  it('keeps code, exit status and class of trouble', async () => {
    const path = newFile();
    const store = openForWriting(path);
    const { run } = fillRun(store);
    const reader = startReader(path);
    const mistake = await reader.counts({ run, where: 'Mtt > 1' }).catch((error: unknown) => error);
    expect(mistake).toBeInstanceOf(UserMistake);
    expect(mistake).toMatchObject({ code: 'user-mistake', exit: 2 });
    const broken = await reader.counts({ run: 99, where: '' }).catch((error: unknown) => error);
    expect(broken).toBeInstanceOf(Broken);
    expect(broken).toMatchObject({ code: 'no-such-run', exit: 3 });
    await reader.close();
    store.close();
  });

  it('waits for a store that does not exist yet', async () => {
    const path = newFile();
    const reader = startReader(path);
    await expect(reader.runs()).rejects.toMatchObject({ code: 'no-store' });
    openForWriting(path).close();
    expect(await reader.runs()).toEqual([]);
    await reader.close();
  });

  it('answers what was asked before it was closed, and refuses afterwards', async () => {
    const path = newFile();
    openForWriting(path).close();
    const reader = startReader(path);
    const pending = [reader.runs(), reader.runs()];
    await reader.close();
    expect(await Promise.all(pending)).toEqual([[], []]);
    await expect(reader.runs()).rejects.toMatchObject({ code: 'reader-closed' });
    await reader.close();
  });
});
