import type { DashboardCommands } from '../../dashboard/commands.js';
import { exportCsv } from '../export/csv.js';
import type { AsyncQuestions } from '../store/reading.js';
import type { RunRecord } from '../store/records.js';
import { catalogueOf } from './catalogue-of-run.js';
import { filterMistake } from './check-filter.js';
import { describeExport } from './describe-export.js';
import { planOf } from './new-run.js';
import { quoted } from './shell.js';
import { storedPoint } from './stored-point.js';

/** What the dashboard asks of the commands, over the reader thread of one store. */
export function dashboardCommands(questions: AsyncQuestions): DashboardCommands {
  return {
    async catalogue(id) {
      const run = await questions.run(id);
      return run && catalogueOf(planOf(run));
    },
    async pointFacts(id, stratum, index) {
      const run = await questions.run(id);
      return run && storedPoint(questions, run, stratum, index);
    },
    async checkFilter(id, where) {
      const columns = await questions.columns(id);
      return filterMistake(
        where,
        columns.map((column) => column.name),
      );
    },
    csv: (view, columns) => exportCsv(questions, view, columns),
    csvDescription: (view, columns) => describeExport(questions, view, columns, `run-${view.run}.csv`),
    provenance: (id) => describeExport(questions, { run: id, where: '' }, [], `run-${id}.csv`),
    async reproduce(id) {
      const run = await questions.run(id);
      return run === undefined ? [] : commandLines(run);
    },
  };
}

function commandLines(run: RunRecord) {
  const launched = {
    command: `npx trigpoint launch ${quoted(run.scanFile.name)}`,
    does: 'runs the scan file: the same plan, the same digest',
  };
  return [
    ...(run.relation === 'launch' && run.scanFile.name !== '' ? [launched] : []),
    {
      command: `npx trigpoint rerun ${run.id}`,
      does: 'computes every point of the stored plan again and compares the digests',
    },
    {
      command: `npx trigpoint verify ${run.id} --sample 0.05`,
      does: 'computes every twentieth point again and compares it bit by bit',
    },
    {
      command: `npx trigpoint export ${run.id} --out run-${run.id}.csv`,
      does: 'writes all points, with a description beside them',
    },
  ];
}
