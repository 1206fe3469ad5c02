import type { CommandLine, DashboardCommands } from '../../dashboard/commands.js';
import { exportCsv } from '../export/csv.js';
import type { AsyncQuestions } from '../store/reading.js';
import type { RunRecord } from '../store/records.js';
import { catalogueOf } from './catalogue-of-run.js';
import { filterMistake } from './check-filter.js';
import { describeExport } from './describe-export.js';
import { planOf } from './new-run.js';
import { USUAL_STORE } from './read-store.js';
import { quoted } from './shell.js';
import { storedPoint } from './stored-point.js';

/** What the dashboard asks of the commands, over the reader thread of one store.
 *  @param store path of the store, for the command lines that it shows */
export function dashboardCommands(questions: AsyncQuestions, store = USUAL_STORE): DashboardCommands {
  return {
    async catalogue(id) {
      const run = await questions.run(id);
      return run && catalogueOf(planOf(run));
    },
    async pointFacts(id, stratum, index) {
      const run = await questions.run(id);
      return run && storedPoint(questions, run, stratum, index, store);
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
      return run === undefined ? [] : commandLines(run, store);
    },
  };
}

function commandLines(run: RunRecord, store: string): CommandLine[] {
  const where = store === USUAL_STORE ? '' : ` --store ${quoted(store)}`;
  const line = (words: string, does: string) => ({ command: `npx trigpoint ${words}${where}`, does });
  const launched = line(
    `launch ${quoted(run.scanFile.name)}`,
    'runs the scan file: the same plan, the same digest',
  );
  return [
    ...(run.relation === 'launch' && run.scanFile.name !== '' ? [launched] : []),
    line(`rerun ${run.id}`, 'computes every point of the stored plan again and compares the digests'),
    line(`verify ${run.id} --sample 0.05`, 'computes every twentieth point again and compares it bit by bit'),
    line(`export ${run.id} --out run-${run.id}.csv`, 'writes all points, with a description beside them'),
  ];
}
