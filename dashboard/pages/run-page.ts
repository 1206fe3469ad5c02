import type { ColumnRecord, RunRecord } from '../../orchestrator/store/records.js';
import type { CutFlow } from '../../orchestrator/store/reading.js';
import type { Catalogue } from '../commands.js';
import type { ConditionGroup } from '../conditions.js';
import { html, type Safe } from '../html.js';
import { mayMove, type Moment } from '../live.js';
import { digestShort, momentText } from '../numbers.js';
import type { FieldMistake } from '../view.js';
import { cutFlowSection } from './cut-flow.js';
import { layout } from './layout.js';
import { progressHtml, stateSentence } from './progress.js';
import { provenanceSection, type ProvenanceParts } from './provenance.js';
import { relationHtml } from './relation.js';
import { resultsSection, type ResultParts } from './results.js';
import { modelName, stateHtml } from './runs-page.js';
import { viewForm } from './view-form.js';

export interface RunPageParts extends ResultParts, ProvenanceParts {
  readonly moment: Moment;
  readonly columns: readonly ColumnRecord[];
  readonly conditions: readonly ConditionGroup[];
  readonly mistakes: readonly FieldMistake[];
  readonly cutFlow: CutFlow;
  readonly catalogue: Catalogue | undefined;
  readonly run: RunRecord;
}

export function runPage(parts: RunPageParts): string {
  const { run, moment } = parts;
  const live = mayMove(run);
  return layout({
    title: run.title || `Run ${run.id}`,
    trail: [
      { title: 'Runs', address: '/' },
      { title: `Run ${run.id}`, address: `/runs/${run.id}` },
    ],
    main: html`<div ${live && html`sse-connect="/runs/${run.id}/live" sse-close="done"`}>
      <section class="sheet masthead" aria-labelledby="run-title">
        <h1 id="run-title">${run.title || 'untitled'}</h1>
        ${identity(parts)}
        <p role="status" class="state-line" ${live && html`sse-swap="state"`}>${stateSentence(moment)}</p>
        <div id="progress" ${live && html`sse-swap="progress"`}>${progressHtml(moment)}</div>
      </section>
      <nav class="within" aria-label="On this page">
        <a href="#results">Figure and points</a> <a href="#cut-flow">Cut-flow</a>
        <a href="#provenance">Provenance</a>
      </nav>
      <div class="explore">
        ${viewForm({ run: run.id, view: parts.view, columns: parts.columns, conditions: parts.conditions, mistakes: parts.mistakes })}
        ${resultsSection(parts)}
      </div>
      ${cutFlowSection(parts.cutFlow, parts.catalogue)} ${provenanceSection(parts)}
    </div>`,
  });
}

function identity({ run }: RunPageParts): Safe {
  const refresh = html`hx-get="/runs/${run.id}" hx-trigger="sse:done" hx-select="#identity"
  hx-select-oob="#provenance" hx-swap="outerHTML" hx-disinherit="*"`;
  return html`<p id="identity" class="identity" ${mayMove(run) && refresh}>
    Run ${run.id} · ${modelName(run)} · ${relationHtml(run)} ${momentText(run.started)} ·
    ${
      run.digest
        ? html`${stateHtml(run.state)} · digest <code title="${run.digest}">${digestShort(run.digest)}</code>`
        : html`no digest yet`
    }
  </p>`;
}
