import type { ColumnRecord, ConstraintRecord, RunRecord } from '../../orchestrator/store/records.js';
import type { Catalogue, StoredPoint } from '../commands.js';
import { couplingPanels } from '../couplings-figure.js';
import { html, raw, type Part, type Safe } from '../html.js';
import { NARROW, WIDE, type Size } from '../plots/drawing.js';
import { proseHtml } from '../prose.js';
import { constraintCards } from './constraint-cards.js';
import { layout } from './layout.js';
import { couplingTable, inputTable, quantityTables, storedTable } from './point-tables.js';
import { commandList } from './provenance.js';

export interface PointPageParts {
  readonly run: RunRecord;
  readonly stratum: number;
  readonly index: number;
  readonly columns: readonly ColumnRecord[];
  readonly constraints: readonly ConstraintRecord[];
  /** Every stored column. */
  readonly stored: ReadonlyMap<string, number>;
  /** Its facts alone, where no worker could do the point: it is not evaluated here either. */
  readonly evaluated: StoredPoint;
  readonly catalogue: Catalogue | undefined;
  /** Neighbours in the stratum, where there are any. */
  readonly previous: number | null;
  readonly next: number | null;
}

export function pointPage(parts: PointPageParts): string {
  const { run, stratum, index, evaluated } = parts;
  const name = `Point ${stratum} · ${index}`;
  return layout({
    title: `${name} of run ${run.id}`,
    trail: [
      { title: 'Runs', address: '/' },
      { title: `Run ${run.id}`, address: `/runs/${run.id}` },
      { title: name, address: pointAddress(parts, index) },
    ],
    main: html`<section class="sheet masthead" aria-labelledby="point-title">
        <p class="eyebrow"><a href="/runs/${run.id}">${run.title || `Run ${run.id}`}</a></p>
        <h1 id="point-title">${name}</h1>
        ${verdictWords(parts)} ${neighbours(parts)}
      </section>
      ${isUnfinished(parts) ? storedTable(parts.columns, parts.stored) : evaluatedSections(parts, evaluated)}
      ${reproduction(parts)}`,
  });
}

/** The verdict in words, and what brought it about. */
export function verdictWords(parts: PointPageParts): Safe {
  const { evaluated, constraints, catalogue } = parts;
  if (isUnfinished(parts)) {
    const reason = evaluated.facts.reason;
    return html`<p class="verdict verdict-unfinished">
      Unfinished: no worker could compute this point${reason && html` (${reason})`}, so it is not evaluated
      here either.
    </p>`;
  }
  const { facts } = evaluated;
  const deciding = constraints.filter((constraint) => constraint.deciding);
  const violated = deciding.filter(({ name }) => facts.constraints[name]?.outcome === 'violated');
  if (facts.verdict === 'failed') {
    return html`<p class="verdict verdict-failed">Failed: ${facts.reason ?? 'no reason was recorded'}.</p>`;
  }
  if (facts.verdict === 'excluded') {
    return html`<p class="verdict verdict-excluded">
        Excluded by ${violated.length} of ${deciding.length} deciding
        constraint${deciding.length !== 1 && 's'}:
      </p>
      <ul class="why">
        ${violated.map(
          ({ name }) =>
            html`<li>
              <a href="#constraint-${name}"
                >${catalogue?.constraints.find((one) => one.name === name)?.title ?? name}</a
              >: ${proseHtml(facts.constraints[name].detail)}
            </li>`,
        )}
      </ul>`;
  }
  const away = deciding.filter(({ name }) => facts.constraints[name]?.outcome === 'not-applicable').length;
  return html`<p class="verdict verdict-surviving">
    Surviving:
    ${deciding.length === 0 ? 'no constraint decides in this run' : `none of the ${deciding.length} deciding constraints is violated`}${
      away > 0 && `; ${away} of them ${away === 1 ? 'does' : 'do'} not apply here`
    }.
  </p>`;
}

function isUnfinished({ evaluated }: PointPageParts): boolean {
  return evaluated.facts.verdict === 'unfinished';
}

function neighbours(parts: PointPageParts): Safe {
  const { previous, next } = parts;
  return html`<nav class="pager" aria-label="Neighbouring points">
    ${previous !== null && html`<a rel="prev" href="${pointAddress(parts, previous)}">Point before</a>`}
    ${next !== null && html`<a rel="next" href="${pointAddress(parts, next)}">Point after</a>`}
  </nav>`;
}

function evaluatedSections(parts: PointPageParts, evaluated: StoredPoint): Part {
  const { catalogue, constraints, run } = parts;
  return [
    html`<section class="sheet" aria-labelledby="constraints-title">
      <h2 id="constraints-title">Constraints</h2>
      <div class="constraints">${constraintCards(evaluated.facts, constraints, catalogue)}</div>
    </section>`,
    html`<section class="sheet" aria-labelledby="couplings-title">
      <h2 id="couplings-title">Running couplings</h2>
      <div class="panels">${couplingFigures(evaluated)}</div>
      ${couplingTable(evaluated)}
    </section>`,
    html`<section class="sheet" aria-labelledby="inputs-title">
      <h2 id="inputs-title">Inputs</h2>
      ${inputTable(evaluated.facts, catalogue, run, parts.stratum)}
    </section>`,
    html`<section class="sheet" aria-labelledby="quantities-title">
      <h2 id="quantities-title">Quantities</h2>
      ${quantityTables(evaluated.facts, catalogue)}
    </section>`,
  ];
}

const PANEL_WIDE: Size = { ...WIDE, width: 640, height: 380 };
const PANEL_NARROW: Size = { ...NARROW, height: 320 };

function couplingFigures({ trace }: StoredPoint): Part {
  if (trace.scales.length < 2) return html`<p>The running did not get far enough to be drawn.</p>`;
  return couplingPanels(trace).map((panel) => {
    const setting = { summary: panel.summary, notes: [], place: 'page' } as const;
    return html`<figure>
      <div class="wide-only">${raw(panel.draw({ ...setting, size: PANEL_WIDE }))}</div>
      <div class="narrow-only">${raw(panel.draw({ ...setting, size: PANEL_NARROW }))}</div>
    </figure>`;
  });
}

function reproduction(parts: PointPageParts): Safe {
  const { run, evaluated } = parts;
  const { fingerprint } = evaluated.facts;
  return html`<section class="sheet" aria-labelledby="again-title">
    <h2 id="again-title">The same point again</h2>
    ${!isUnfinished(parts) && agreement(evaluated)}
    ${commandList([{ command: evaluated.command, does: 'evaluates this point with all its inputs' }])}
    <dl class="facts">
      ${
        fingerprint !== '' &&
        html`<div>
          <dt>Fingerprint of the point, its result and all it is a function of</dt>
          <dd><code>${fingerprint}</code></dd>
        </div>`
      }
      <div>
        <dt>Run</dt>
        <dd>
          <a href="/runs/${run.id}#provenance">run ${run.id}</a
          >${run.digest && html`, digest <code>${run.digest}</code>`}
        </dd>
      </div>
      <div>
        <dt>Task</dt>
        <dd><code>${run.fingerprints.task}</code></dd>
      </div>
    </dl>
  </section>`;
}

function agreement({ differing }: StoredPoint): Safe {
  if (differing.length === 0) {
    return html`<p>Evaluated again for this page: every stored number came out the same to the last bit.</p>`;
  }
  return html`<p class="mistake">
    Evaluated again for this page, these stored numbers came out different: ${differing.join(', ')}. The code
    or the data of this installation are not those of the run; <code>npx trigpoint verify</code> tells more.
  </p>`;
}

function pointAddress({ run, stratum }: PointPageParts, index: number): string {
  return `/runs/${run.id}/points/${stratum}/${index}`;
}
