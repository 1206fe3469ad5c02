import type { RunRecord } from '../../orchestrator/store/records.js';
import type { CheckFacts } from '../../orchestrator/commands/commands.js';
import { html, type Safe } from '../html.js';
import { countText, digestShort, durationText, momentText } from '../numbers.js';
import { shareText } from '../share.js';
import { layout } from './layout.js';
import { relationHtml } from './relation.js';
import { verdictBar } from './verdict-bar.js';

/** All runs of the store, the newest first. */
export function runsPage(runs: readonly RunRecord[]): string {
  return layout({
    title: 'Runs',
    trail: [{ title: 'Runs', address: '/' }],
    main:
      runs.length === 0
        ? emptyState()
        : html`<h1>Runs</h1>
            ${runsSection(runs)}`,
  });
}

function runsSection(runs: readonly RunRecord[]): Safe {
  const moving = runs.some((run) => run.state === 'running');
  const refresh = moving
    ? html` hx-get="/" hx-trigger="every 3s" hx-select="#runs" hx-swap="outerHTML" hx-disinherit="*"`
    : '';
  const newestFirst = [...runs].sort((a, b) => b.id - a.id);
  return html`<section id="runs" class="sheet" aria-label="Runs" ${refresh}>
    <div class="scroll" role="region" aria-label="Table of runs" tabindex="0">
      <table class="runs">
        <thead>
          <tr>
            <th scope="col">Run</th>
            <th scope="col">Title</th>
            <th scope="col">State</th>
            <th scope="col" class="number">Points</th>
            <th scope="col">Surviving</th>
            <th scope="col" class="number">Failed</th>
            <th scope="col">Digest</th>
            <th scope="col">Started</th>
            <th scope="col" class="number">Took</th>
          </tr>
        </thead>
        <tbody>
          ${newestFirst.map(row)}
        </tbody>
      </table>
    </div>
  </section>`;
}

function row(run: RunRecord): Safe {
  const { counts } = run;
  return html`<tr>
    <td class="number">${run.id}</td>
    <th scope="row">
      <a id="run-${run.id}" href="/runs/${run.id}">${run.title || 'untitled'}</a>
      <span class="under">${modelName(run)} · ${relationHtml(run)}</span>
    </th>
    <td>${stateHtml(run.state)}</td>
    <td class="number">
      ${countText(counts.points)}${
        counts.points < run.wanted && html`<span class="under">of ${countText(run.wanted)}</span>`
      }
    </td>
    <td class="with-bar">
      ${shareText(counts.surviving, counts.points)}<span class="under"
        >${countText(counts.surviving)} points</span
      >
      ${verdictBar(counts, run.wanted)}
    </td>
    <td class="number">
      ${countText(counts.failed)}${
        counts.unfinished > 0 && html`<span class="under">${countText(counts.unfinished)} unfinished</span>`
      }
    </td>
    <td>${run.digest ? html`<code title="${run.digest}">${digestShort(run.digest)}</code>` : '–'}</td>
    <td class="nowrap">${momentText(run.started)}</td>
    <td class="number nowrap">${durationText(run.seconds)}</td>
  </tr>`;
}

export function stateHtml(state: RunRecord['state']): Safe {
  return html`<span class="state state-${state}">${state}</span>`;
}

export function modelName(run: RunRecord): string {
  const { model } = JSON.parse(run.plan) as CheckFacts['plan'];
  const options = Object.entries(model.options).map(([key, value]) => `${key} = ${value}`);
  return options.length === 0 ? model.name : `${model.name} (${options.join(', ')})`;
}

function emptyState(): Safe {
  return html`<section class="sheet narrow">
    <h1>No run yet</h1>
    <p>
      This store is empty. A run starts from a scan file: what to vary, over which range, and which
      constraints decide.
    </p>
    <p>Check a scan file, then launch it from a terminal beside this one:</p>
    <pre><code>npx trigpoint check scans/electroweak-vacuum.yaml
npx trigpoint launch scans/electroweak-vacuum.yaml</code></pre>
    <p>It appears here as soon as its first points are stored. <a href="/">Look again</a></p>
  </section>`;
}
