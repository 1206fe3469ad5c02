import type { LaunchFacts } from '../commands/launch.js';
import type { ListFacts } from '../commands/list.js';
import type { RunAccount } from '../commands/run-facts.js';
import type { RerunFacts } from '../commands/rerun.js';
import { differencesText } from './compare-text.js';
import { count, duration, share } from './numbers.js';
import { table } from './table.js';

/** A run in a few lines. */
export function runText(run: RunAccount): string {
  const verdicts = (['surviving', 'excluded', 'failed', 'unfinished'] as const).map((name) => [
    name,
    count(run[name]),
    share(run[name], run.points),
  ]);
  const whole = run.points === run.wanted ? '' : `of ${count(run.wanted)} `;
  return [
    `run ${run.run}  ${run.title}  (${run.state})`,
    table([], [['points', count(run.points), `${whole}in ${duration(run.seconds)}`], ...verdicts]),
    `digest  ${run.digest ?? 'none yet: the run is not finished'}`,
  ].join('\n');
}

export function launchText(facts: LaunchFacts): string {
  const dashboard = facts.dashboard === undefined ? '' : `\ndashboard  ${facts.dashboard}`;
  return `${runText(facts)}${dashboard}`;
}

export function rerunText(facts: RerunFacts): string {
  const { parent, parentDigest, sameDigest, changed } = facts;
  const lines = [runText(facts)];
  if (sameDigest !== null)
    lines.push(sameDigest ? `the same digest as run ${parent}` : `run ${parent} has digest ${parentDigest}`);
  if (changed.length > 0) lines.push(`not as in run ${parent}:`, differencesText(changed));
  return lines.join('\n');
}

export function listText({ runs }: ListFacts): string {
  if (runs.length === 0) return 'the store has no run yet';
  const rows = runs.map((run) => [
    String(run.run),
    run.title,
    run.parent === null ? run.relation : `${run.relation} of ${run.parent}`,
    run.state,
    count(run.points),
    share(run.surviving, run.points),
    run.started.slice(0, 16).replace('T', ' '),
    run.digest?.slice(7, 19) ?? '-',
  ]);
  return table(['run', 'title', 'made by', 'state', 'points', 'surviving', 'started (UTC)', 'digest'], rows);
}
