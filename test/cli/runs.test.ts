import { readFileSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { document, folderWithScans, start, trigpoint } from './trigpoint.js';

/** Runs from launch to export, as a process; every digest here is compared, none is typed in. */

describe('a run from the command line', () => {
  it('goes all the way: check, launch, list, show, rerun, extend, rejudge, verify, compare, export', async () => {
    const cwd = folderWithScans(300);
    const here = { cwd };
    const checked = await document(['check', 'plane.yaml'], here);
    expect(checked).toMatchObject({ format: 1, points: 300, plan: { title: 'A plane for tests' } });
    expect(readdirSync(cwd)).toEqual(['plane.yaml']);

    const launched = await document(['launch', 'plane.yaml'], here);
    expect(launched).toMatchObject({ run: 1, state: 'complete', points: 300, unfinished: 0, how: 'new' });
    const again = await document(['launch', 'plane.yaml'], here);
    expect(again).toMatchObject({ run: 1, how: 'finished', digest: launched.digest });

    const rerun = await document(['rerun', 'latest'], here);
    expect(rerun).toMatchObject({ run: 2, parent: 1, sameDigest: true, digest: launched.digest });
    const extended = await document(['extend', '1', '--points', '400'], here);
    expect(extended).toMatchObject({ run: 3, parent: 1, points: 400, reused: 300 });

    writeFileSync(join(cwd, 'strict.yaml'), 'require: [perturbativity, vacuum-stability]\n');
    const judged = await document(['rejudge', '1', '--with', 'strict.yaml'], here);
    expect(judged).toMatchObject({ run: 4, parent: 1, points: 300, state: 'complete' });
    expect(Number(judged.surviving)).toBeLessThan(Number(launched.surviving));

    expect(await document(['verify', '3', '--sample', '10%'], here)).toMatchObject({
      recomputed: 40,
      differing: 0,
    });
    const compared = await document(['compare', '1', '4'], here);
    const lost = Number(launched.surviving) - Number(judged.surviving);
    expect(compared).toMatchObject({ points: { same: 300 }, verdicts: { 'surviving to excluded': lost } });

    const { runs } = await document(['list'], here);
    expect((runs as { run: number; relation: string }[]).map(({ run, relation }) => [run, relation])).toEqual(
      [
        [1, 'launch'],
        [2, 'rerun'],
        [3, 'extend'],
        [4, 'rejudge'],
      ],
    );
    const shown = await document(['show', String(launched.digest).slice(7, 19)], here);
    expect(shown).toMatchObject({ run: 1, cutFlow: { points: 300 } });

    const csv = await trigpoint(['export', '1', '--surviving', '--columns', 'Mt,Mh'], here);
    const rows = csv.out.trimEnd().split('\r\n');
    expect(rows[0]).toBe('stratum,index,verdict,Mt,Mh');
    expect(rows.length - 1).toBe(launched.surviving);
    expect(csv.err).toBe('');
  });

  it('exports a file once, with its description, and in other formats', async () => {
    const cwd = folderWithScans(60);
    const here = { cwd };
    await document(['launch', 'plane.yaml'], here);
    const words = ['export', '1', '--where', 'Mt < 175', '--out', 'light.csv'];
    const facts = await document(words, here);
    expect(facts).toMatchObject({
      file: 'light.csv',
      description: 'light.provenance.json',
      where: 'Mt < 175',
    });
    const description = JSON.parse(readFileSync(join(cwd, 'light.provenance.json'), 'utf8')) as object;
    expect(description).toMatchObject({ url: 'light.csv', 'trigpoint:filter': 'Mt < 175' });
    const second = await trigpoint(words, here);
    expect(second.status).toBe(2);
    expect(second.err).toMatch(/expected a file that does not exist yet/);
    const wrong = await trigpoint(['export', '1', '--where', 'Mtt < 175'], here);
    expect(wrong).toMatchObject({ status: 2, out: '' });
    expect(wrong.err).toMatch(/--where, column 1: .*found Mtt \(did you mean Mt\?\)/);
    for (const format of ['parquet', 'sqlite'])
      expect(
        (await trigpoint(['export', '1', '--format', format, '--out', `a.${format}`], here)).status,
      ).toBe(0);
    expect(readFileSync(join(cwd, 'a.parquet')).subarray(0, 4).toString()).toBe('PAR1');
    expect(readFileSync(join(cwd, 'a.sqlite')).subarray(0, 15).toString()).toBe('SQLite format 3');
    const store = await trigpoint(['export', '1', '--format', 'sqlite', '--out', 'trigpoint.sqlite'], here);
    expect(store.status).toBe(2);
  });
});

describe('progress', () => {
  it('goes to standard error in plain lines where that is no terminal', async () => {
    const { status, out, err } = await trigpoint(['launch', 'plane.yaml'], { cwd: folderWithScans(300) });
    expect(status).toBe(0);
    expect(out).not.toContain('%  ');
    expect(err).toMatch(/^100 % {2}300 of 300 points.* surviving/m);
    expect(err).not.toMatch(/[\r\u001b]/);
  });
});

describe('Ctrl-C', () => {
  it('pauses the run with status 130; launched again, it ends with the digest of an undisturbed run', async () => {
    const cwd = folderWithScans(30_000);
    const running = start(['launch', 'plane.yaml', '--json'], { cwd });
    await running.saying(/^\d+ % {2}[1-9][\d,]* of 30,000/m);
    running.process.kill('SIGINT');
    const stopped = await running.ended;
    expect(stopped.status).toBe(130);
    const paused = JSON.parse(stopped.out) as { state: string; points: number };
    expect(paused.state).toBe('paused');
    expect(paused.points).toBeLessThan(30_000);
    expect(stopped.err).toMatch(/run 1 is paused: the same command again goes on with it/);
    const resumed = await document(['launch', 'plane.yaml'], { cwd });
    expect(resumed).toMatchObject({ run: 1, how: 'resumed', state: 'complete', points: 30_000 });
    const undisturbed = await document(['launch', 'plane.yaml'], { cwd: folderWithScans(30_000) });
    expect(resumed.digest).toBe(undisturbed.digest);
  });

  it('ends a command that only reads at once', async () => {
    const cwd = folderWithScans(100_000);
    const running = start(['launch', 'plane.yaml'], { cwd });
    await running.saying(/^\d+ % {2}[1-9]/m);
    const watching = start(['watch'], { cwd });
    await watching.saying(/of 100,000 points/);
    watching.process.kill('SIGINT');
    expect((await watching.ended).status).toBe(130);
    running.process.kill('SIGINT');
    await running.ended;
  });
});

describe('two launches on one store', () => {
  it('are kept apart: the second is refused with status 3, the first goes on undisturbed', async () => {
    const cwd = folderWithScans(100_000);
    const running = start(['launch', 'plane.yaml', '--json'], { cwd });
    await running.saying(/^\d+ % {2}[1-9]/m);
    const second = await trigpoint(['launch', 'plane.yaml'], { cwd });
    expect(second.status).toBe(3);
    expect(second.err).toMatch(/is working on this store/);
    running.process.kill('SIGINT');
    const { status, out } = await running.ended;
    expect(status).toBe(130);
    const { points } = JSON.parse(out) as { points: number };
    expect(await document(['verify', '1', '--sample', '0.01'], { cwd })).toMatchObject({
      points,
      differing: 0,
    });
  });
});

describe('--serve', () => {
  it('prints the address, answers while the run goes on, stays open on the finished run, and Ctrl-C closes it', async () => {
    const cwd = folderWithScans(500);
    const running = start(['launch', 'plane.yaml', '--serve', '--port', '0', '--json'], { cwd });
    const [, address] = await running.saying(/^dashboard (http:\/\/\S+\/runs\/1)$/m);
    expect((await fetch(address)).status).toBe(200);
    await running.saying(/stays open/);
    expect(JSON.parse(running.out())).toMatchObject({ state: 'complete', points: 500, dashboard: address });
    const page = await (await fetch(address)).text();
    expect(page).toContain('A plane for tests');
    running.process.kill('SIGINT');
    expect((await running.ended).status).toBe(0);
    await expect(fetch(address)).rejects.toThrow();
  });

  it('of a store alone does the same, and a taken port is told', async () => {
    const cwd = folderWithScans(20);
    await document(['launch', 'plane.yaml'], { cwd });
    const running = start(['serve', '--port', '0', '--json'], { cwd });
    const address = await new Promise<string>((resolve) => {
      running.process.stdout?.on('data', () =>
        resolve((JSON.parse(running.out()) as { dashboard: string }).dashboard),
      );
    });
    expect(await (await fetch(address)).text()).toContain('A plane for tests');
    const { port } = new URL(address);
    const second = await trigpoint(['serve', '--port', port], { cwd });
    expect(second.status).toBe(3);
    expect(second.err).toMatch(new RegExp(`cannot listen on 127.0.0.1:${port}: the port is taken`));
    running.process.kill('SIGINT');
    expect((await running.ended).status).toBe(0);
  });
});

describe('a launch that is killed', () => {
  it('is noticed by watch with status 1, and launched again it ends with the digest of an undisturbed run', async () => {
    const cwd = folderWithScans(6000);
    const running = start(['launch', 'plane.yaml'], { cwd });
    await running.saying(/^\d+ % {2}[1-9][\d,]* of 6,000/m);
    running.process.kill('SIGKILL');
    await running.ended;
    const watched = await trigpoint(['watch', 'latest', '--json'], { cwd });
    expect(watched.status).toBe(1);
    expect(JSON.parse(watched.out)).toMatchObject({ run: 1, state: 'running', abandoned: true });
    const resumed = await document(['launch', 'plane.yaml'], { cwd });
    expect(resumed).toMatchObject({ run: 1, how: 'resumed', state: 'complete', points: 6000 });
    const undisturbed = await document(['launch', 'plane.yaml'], { cwd: folderWithScans(6000) });
    expect(resumed.digest).toBe(undisturbed.digest);
  });
});

describe('one Ctrl-C that is told twice, by the terminal and by npm', () => {
  it('is one: the run is paused cleanly', async () => {
    const cwd = folderWithScans(20_000);
    const running = start(['launch', 'plane.yaml', '--json'], { cwd });
    await running.saying(/^\d+ % {2}[1-9]/m);
    running.process.kill('SIGINT');
    running.process.kill('SIGINT');
    const { status, out } = await running.ended;
    expect(status).toBe(130);
    expect(JSON.parse(out)).toMatchObject({ state: 'paused' });
  });
});
