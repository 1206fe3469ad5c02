import { Option } from 'commander';
import type { Command } from 'commander';
import type { RunningSettings } from '../../workers/contract.js';
import { assignments, finiteNumber, numberAssignments } from '../commands/assignments.js';
import { betas } from '../commands/betas.js';
import { describeConstraints } from '../commands/constraints.js';
import { describeModel, listModels } from '../commands/models.js';
import { findRun } from '../commands/find-run.js';
import { planOf } from '../commands/new-run.js';
import { point } from '../commands/point.js';
import { withReading } from '../commands/read-store.js';
import { schema } from '../commands/schema.js';
import { betasText, constraintsText, constraintText, modelsText, modelText } from './catalogue-text.js';
import { readUserFile } from './files.js';
import { example, withJson, withStore } from './options.js';
import { pointText } from './point-text.js';
import { answer, write } from './session.js';
import type { JsonOption, Session } from './session.js';

/** Commands that ask nothing of a store, but for point --run: point, models, betas, constraints, schema. */
export function askCatalogue(program: Command, session: Session): void {
  pointCommand(program, session);
  modelsCommand(program, session);
  betasCommand(program, session);
  constraintsCommand(program, session);
  schemaCommand(program, session);
}

interface PointOptions extends JsonOption {
  readonly set?: readonly string[];
  readonly option?: readonly string[];
  readonly loops?: string;
  readonly tolerance?: string;
  readonly scan?: string;
  readonly run?: string;
  readonly store: string;
}

function pointCommand(program: Command, session: Session): void {
  const command = program
    .command('point <model>')
    .description(
      'evaluate one point; without --scan or --run every constraint of the catalogue decides, with its default options',
    )
    .option('--set <name=value...>', 'inputs in their own units (the others have their defaults)')
    .option('--option <name=value...>', 'options of the model')
    .addOption(new Option('--loops <n>', 'order of the beta functions (default: 3)').choices(['1', '2', '3']))
    .option('--tolerance <x>', 'wanted relative error of the couplings (default: 1e-9)')
    .option('--scan <file>', 'definitions, fixed inputs, running and constraints of this scan file')
    .addOption(new Option('--run <run>', 'the same, of this run').conflicts('scan'));
  example(
    withJson(withStore(command)),
    'point sm --set Mt=173.34 Mh=125.15 alphaS=0.1184 MW=80.384 cutoff=1.2209e19 --json',
  ).action(async (model: string, options: PointOptions) => {
    const { scan, run, loops, tolerance, store } = options;
    const facts = point({
      model,
      set: numberAssignments(options.set ?? [], '--set'),
      options: assignments(options.option ?? [], '--option'),
      loops: loops === undefined ? undefined : (Number(loops) as RunningSettings['loops']),
      tolerance: tolerance === undefined ? undefined : finiteNumber(tolerance, '--tolerance'),
      scan: scan === undefined ? undefined : { bytes: readUserFile(scan), file: scan },
      plan: run === undefined ? undefined : await withReading(store, (open) => planOf(findRun(open, run))),
    });
    await answer(session, options, facts, pointText);
  });
}

function modelsCommand(program: Command, session: Session): void {
  const command = program.command('models [name]').description('the models there are, or one in full');
  example(withJson(command), 'models sm').action((name: string | undefined, options: JsonOption) =>
    name === undefined
      ? answer(session, options, listModels(), modelsText)
      : answer(session, options, describeModel(name), modelText),
  );
}

function betasCommand(program: Command, session: Session): void {
  const command = program
    .command('betas <model>')
    .description('beta functions d/dt, t = ln mu, at given couplings, by loop order')
    .option('--at <name=value...>', 'couplings; those not given are 0');
  example(withJson(command), 'betas sm --at g2=0.65 g3=1.16 yt=0.94 lambda=0.13').action(
    (model: string, options: JsonOption & { readonly at?: readonly string[] }) =>
      answer(session, options, betas(model, numberAssignments(options.at ?? [], '--at')), betasText),
  );
}

function constraintsCommand(program: Command, session: Session): void {
  const command = program
    .command('constraints [name]')
    .description('the constraints there are, or one in full with its options and sources');
  example(withJson(command), 'constraints vacuum-stability').action(
    (name: string | undefined, options: JsonOption) =>
      answer(
        session,
        options,
        describeConstraints(name),
        name === undefined ? constraintsText : constraintText,
      ),
  );
}

function schemaCommand(program: Command, session: Session): void {
  const command = program
    .command('schema')
    .description('the JSON Schema of a scan file, by which editors complete and check it')
    .option('--json', 'the same: a schema is JSON in any case');
  example(command, 'schema > scan.schema.json').action(async () => {
    await write(session, `${JSON.stringify(schema(), null, 2)}\n`);
  });
}
