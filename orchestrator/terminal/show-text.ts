import type { ShowFacts } from '../commands/show.js';
import { count, share } from './numbers.js';
import { runText } from './run-text.js';
import { table } from './table.js';

export function showText(facts: ShowFacts): string {
  const parts = [runText(facts), cutFlowText(facts)];
  if (facts.unfinishedPoints.length > 0) parts.push(unfinishedText(facts));
  parts.push(provenanceText(facts));
  return parts.join('\n\n');
}

function cutFlowText({ cutFlow }: ShowFacts): string {
  const judged = cutFlow.points - cutFlow.failed - cutFlow.unfinished;
  const rows = cutFlow.rows.map((row) => [
    row.constraint,
    row.deciding ? 'decides' : 'noted',
    count(row.violated),
    count(row.notApplicable),
    row.deciding ? count(row.alone) : '',
    row.deciding ? count(row.remaining) : '',
    row.deciding ? share(row.remaining, judged) : '',
  ]);
  return table(['constraint', '', 'violated', 'not applicable', 'alone', 'left', 'of all judged'], rows);
}

function unfinishedText({ unfinishedPoints, unfinished }: ShowFacts): string {
  const lines = unfinishedPoints.map(
    ({ stratum, index, reason }) => `point ${stratum}.${index}: ${reason ?? ''}`,
  );
  const more = unfinished - unfinishedPoints.length;
  return ['unfinished', ...lines, ...(more > 0 ? [`and ${count(more)} more`] : [])].join('\n');
}

function provenanceText(facts: ShowFacts): string {
  const { fingerprints, environment, chunks } = facts;
  const rows = [
    ['made by', facts.parent === null ? facts.relation : `${facts.relation} of run ${facts.parent}`],
    ['scan file', facts.scanFile.name],
    ['started', `${facts.started}${facts.finished === null ? '' : `, finished ${facts.finished}`}`],
    ['plan', fingerprints.plan],
    ['model', fingerprints.model],
    ['sampling', fingerprints.sampling],
    ...Object.entries(fingerprints.modules).map(([name, print]) => [`module ${name}`, print]),
    ...Object.entries(fingerprints.constraints).map(([name, print]) => [`constraint ${name}`, print]),
    ...Object.entries(environment).map(([name, text]) => [name, String(text)]),
    ['chunks', `${count(chunks.done)} done, ${count(chunks.retried)} tried again`],
    ...chunks.workers.map(({ worker, points }) => [`  ${worker}`, `${count(points)} points`]),
  ];
  return table([], rows);
}
