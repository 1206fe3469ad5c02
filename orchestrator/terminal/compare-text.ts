import type { CompareFacts } from '../commands/compare.js';
import type { Difference } from '../commands/differences.js';
import { count, value } from './numbers.js';
import { table } from './table.js';

const SHOWN = 60;
const SHOWN_COLUMNS = 3;

export function compareText(facts: CompareFacts): string {
  const [first, second] = facts.runs;
  const { same, otherInputs, onlyFirst, onlySecond } = facts.points;
  const lines = [
    `runs ${first} and ${second}: ${facts.sameDigest ? 'the same digest' : 'different digests'}`,
    `${count(same)} points in both, of which ${count(facts.changed)} changed`,
  ];
  if (otherInputs > 0) lines.push(`${count(otherInputs)} places hold points with other inputs`);
  if (onlyFirst > 0) lines.push(`${count(onlyFirst)} points only in run ${first}`);
  if (onlySecond > 0) lines.push(`${count(onlySecond)} points only in run ${second}`);
  const verdicts = Object.entries(facts.verdicts).map(([change, n]) => [change, count(n)]);
  if (verdicts.length > 0) lines.push('', table(['verdict', 'points'], verdicts));
  if (facts.columns.length > 0) lines.push('', columnsText(facts));
  if (facts.examples.length > 0) lines.push('', examplesText(facts));
  lines.push(
    '',
    facts.explained.length > 0
      ? 'what is different in where they came from:'
      : 'they came about the same way',
  );
  if (facts.explained.length > 0) lines.push(differencesText(facts.explained));
  return lines.join('\n');
}

/** Some of the points that changed. */
function examplesText({ examples }: CompareFacts): string {
  const rows = examples.map(({ stratum, index, verdicts: [from, to], columns }) => {
    const values = columns.filter((name) => name !== 'verdict');
    const more = values.length > SHOWN_COLUMNS ? ', ...' : '';
    return [
      `${stratum}.${index}`,
      from === to ? from : `${from} to ${to}`,
      values.slice(0, SHOWN_COLUMNS).join(', ') + more,
    ];
  });
  return table(['for instance', 'verdict', 'changed too'], rows);
}

function columnsText(facts: CompareFacts): string {
  const rows = facts.columns.map(({ name, points, largest }) => [name, count(points), value(largest)]);
  return table(['column', 'points', 'largest change'], rows);
}

export function differencesText(differences: readonly Difference[]): string {
  const short = (text: string) => (text.length > SHOWN ? `${text.slice(0, SHOWN)}...` : text);
  const code = (text: string) => text.replace(/^"sha256:([0-9a-f]{12}).*"$/, '$1');
  const rows = differences.map(({ kind, where, first, second }) => [
    kind,
    where,
    short(code(first)),
    short(code(second)),
  ]);
  return table([], rows);
}
