import type { RunRecord } from '../../orchestrator/store/records.js';
import type { ChunkStatistics } from '../../orchestrator/store/reading.js';
import type { CheckFacts } from '../../orchestrator/commands/commands.js';
import type { CommandLine } from '../commands.js';
import { html, type Part, type Safe } from '../html.js';
import { countText, durationText, momentText } from '../numbers.js';
import { relationHtml } from './relation.js';

export interface ProvenanceParts {
  readonly run: RunRecord;
  readonly chunks: ChunkStatistics;
  readonly commands: readonly CommandLine[];
}

/** How this run came about, and how anybody makes it again. */
export function provenanceSection(parts: ProvenanceParts): Safe {
  const { run } = parts;
  return html`<section id="provenance" class="sheet" aria-labelledby="provenance-title">
    <h2 id="provenance-title">Provenance</h2>
    ${commandList(parts.commands)}
    <dl class="facts">
      ${fact('Digest of the results', run.digest ? html`<code>${run.digest}</code>` : 'not yet: the run is not over')}
      ${fact('Came about', html`${relationHtml(run)}, started ${momentText(run.started)}${finished(run)}`)}
      ${fact('Seed', html`<code>${planOf(run).seed}</code>`)} ${environmentFacts(run)}
    </dl>
    ${remarks(run)} ${fingerprints(run)} ${workers(parts.chunks)} ${scanFile(run)}
    <details>
      <summary>The plan: the scan file with every default filled in</summary>
      <pre tabindex="0"><code>${JSON.stringify(JSON.parse(run.plan), null, 2)}</code></pre>
    </details>
    <p class="actions">
      <a href="/runs/${run.id}/provenance.json" download="run-${run.id}-provenance.json"
        >Download the provenance document (JSON)</a
      >
    </p>
  </section>`;
}

export function commandList(commands: readonly CommandLine[]): Safe {
  return html`<dl class="commands">
    ${commands.map(
      ({ command, does }) =>
        html`<dt>${does}</dt>
          <dd>
            <pre tabindex="0"><code>${command}</code></pre>
          </dd>`,
    )}
  </dl>`;
}

function planOf(run: RunRecord): CheckFacts['plan'] {
  return JSON.parse(run.plan) as CheckFacts['plan'];
}

function finished(run: RunRecord): string {
  return run.finished
    ? `, finished ${momentText(run.finished)}, worked on for ${durationText(run.seconds)}`
    : '';
}

function fact(name: string, value: Part): Safe {
  return html`<div>
    <dt>${name}</dt>
    <dd>${value}</dd>
  </div>`;
}

function environmentFacts({ environment }: RunRecord): Part {
  return [
    fact('Trigpoint', html`${environment.trigpoint}, commit <code>${environment.commit}</code>`),
    fact('Lock file', html`<code>${environment.lockFile}</code>`),
    fact('Node.js and V8', `${environment.node}, ${environment.v8}`),
    fact('Machine', `${environment.os}; ${environment.processor}; ${environment.cores} cores`),
  ];
}

function remarks(run: RunRecord): Part {
  const sentences = planOf(run).remarks;
  return (
    sentences.length > 0 &&
    html`<h3>Remarks on the plan</h3>
      <ul>
        ${sentences.map((sentence) => html`<li>${sentence}</li>`)}
      </ul>`
  );
}

function fingerprints({ fingerprints: own }: RunRecord): Safe {
  const rows: [string, string][] = [
    ['plan', own.plan],
    ['task', own.task],
    ['model', own.model],
    ['sampling', own.sampling],
    ...Object.entries(own.modules).map(([name, value]): [string, string] => [`module ${name}`, value]),
    ...Object.entries(own.constraints).map(([name, value]): [string, string] => [
      `constraint ${name}`,
      value,
    ]),
  ];
  return html`<details>
    <summary>Fingerprints of all that the results are a function of (${rows.length})</summary>
    <dl class="facts fingerprints">
      ${rows.map(([name, value]) => fact(name, html`<code>${value}</code>`))}
    </dl>
  </details>`;
}

function workers(chunks: ChunkStatistics): Part {
  return (
    chunks.workers.length > 0 &&
    html`<details>
      <summary>
        Workers (${chunks.workers.length}; ${countText(chunks.done)} chunks, ${countText(chunks.retried)}
        retried)
      </summary>
      <div class="scroll" role="region" aria-label="Table of workers" tabindex="0">
        <table>
          <thead>
            <tr>
              <th scope="col">Worker</th>
              <th scope="col" class="number">Chunks</th>
              <th scope="col" class="number">Points</th>
              <th scope="col" class="number">Worked for</th>
            </tr>
          </thead>
          <tbody>
            ${chunks.workers.map(
              (worker) =>
                html`<tr>
                  <th scope="row"><code>${worker.worker}</code></th>
                  <td class="number">${countText(worker.chunks)}</td>
                  <td class="number">${countText(worker.points)}</td>
                  <td class="number">${durationText(worker.milliseconds / 1000)}</td>
                </tr>`,
            )}
          </tbody>
        </table>
      </div>
    </details>`
  );
}

function scanFile(run: RunRecord): Part {
  if (run.scanFile.text === '') return '';
  return html`<details>
    <summary>The scan file as it was written: ${run.scanFile.name}</summary>
    <pre tabindex="0"><code>${run.scanFile.text}</code></pre>
    <p class="actions">
      <a href="/runs/${run.id}/scan-file" download="${fileName(run)}">Download the scan file</a>
    </p>
  </details>`;
}

function fileName(run: RunRecord): string {
  return run.scanFile.name.split(/[/\\]/).at(-1) || `run-${run.id}.yaml`;
}
