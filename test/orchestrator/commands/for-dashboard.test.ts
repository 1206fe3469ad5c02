import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { DashboardCommands } from '../../../dashboard/commands.js';
import { exportRun } from '../../../orchestrator/commands/export.js';
import { dashboardCommands } from '../../../orchestrator/commands/for-dashboard.js';
import { launch } from '../../../orchestrator/commands/launch.js';
import { startReader } from '../../../orchestrator/store/reader-thread.js';
import type { AsyncQuestions } from '../../../orchestrator/store/reading.js';
import { newStore, plane, work } from './small-runs.js';

describe('what the dashboard asks of the commands', () => {
  let store: string;
  let questions: AsyncQuestions;
  let commands: DashboardCommands;

  beforeAll(async () => {
    store = newStore();
    await launch(plane(80), work(store));
    questions = startReader(store);
    commands = dashboardCommands(questions, store);
  });
  afterAll(() => questions.close());

  it('is what the model and the constraints of a run are, deciding ones first', async () => {
    const catalogue = (await commands.catalogue(1))!;
    expect(catalogue.model.name).toBe('sm');
    expect(catalogue.constraints.map(({ name }) => name)).toEqual([
      'perturbativity',
      'vacuum-stability',
      'measured-top-mass',
    ]);
    expect(catalogue.constraints[1].uses).toEqual({ accept: 'metastable' });
    expect(catalogue.modules.flatMap(({ gives }) => gives.map(({ name }) => name))).toContain('lambdaMin');
    expect(await commands.catalogue(9)).toBeUndefined();
  });

  it('is the CSV that the command export prints, to the byte', async () => {
    const where = 'Mt < 175 and surviving';
    const columns = ['Mt', 'Mh', 'lambdaMin', 'outcome(vacuum-stability)'];
    let page = '';
    for await (const piece of commands.csv({ run: 1, where }, columns)) page += piece;
    let printed = '';
    const request = { store, format: 'csv' as const, where, columns: columns.join(',') };
    const facts = await exportRun('1', request, (text) => {
      printed += text;
      return Promise.resolve();
    });
    expect(page).toBe(printed);
    expect(page.trimEnd().split('\r\n')).toHaveLength(facts.points + 1);
    expect(facts.points).toBeGreaterThan(0);
  });

  it('is a description of that CSV, and where a run came from', async () => {
    const view = { run: 1, where: 'surviving' };
    const description = JSON.parse(await commands.csvDescription(view, ['Mt'])) as object;
    expect(description).toMatchObject({ url: 'run-1.csv', 'trigpoint:filter': 'surviving' });
    const run = (await questions.run(1))!;
    expect(await commands.provenance(1)).toContain(run.digest);
    await expect(commands.provenance(9)).rejects.toMatchObject({ exit: 2 });
  });

  it('is whether a filter can be read', async () => {
    expect(await commands.checkFilter(1, 'ratio > 1.4 and violated(measured-top-mass)')).toBeNull();
    expect(await commands.checkFilter(1, 'ration > 1.4')).toMatchObject({
      position: 0,
      hint: 'did you mean ratio?',
    });
  });

  it('is how to make a run again, with its store where that is not the usual one', async () => {
    const lines = await commands.reproduce(1);
    expect(lines[0].command).toBe(`npx trigpoint launch plane.yaml --store ${store}`);
    expect(lines.map(({ command }) => command.split(' ')[2])).toEqual([
      'launch',
      'rerun',
      'verify',
      'export',
    ]);
    const [usual] = await dashboardCommands(questions).reproduce(1);
    expect(usual.command).toBe('npx trigpoint launch plane.yaml');
    expect(await commands.reproduce(9)).toEqual([]);
  });
});
