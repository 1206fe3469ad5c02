import type { FilteredCounts, PageOfPoints } from '../../orchestrator/store/reading.js';
import type { RunRecord } from '../../orchestrator/store/records.js';
import type { Figure } from '../figure.js';
import { html, raw, type Part, type Safe } from '../html.js';
import { countText, digestShort } from '../numbers.js';
import { NARROW, WIDE } from '../plots/drawing.js';
import { proseHtml } from '../prose.js';
import { percentText } from '../share.js';
import { viewQuery, type RunView } from '../view.js';
import { pointsTable } from './points-table.js';

export interface ResultParts {
  readonly run: RunRecord;
  readonly view: RunView;
  /** The filter in force: the whole one, or none where it is mistaken. */
  readonly where: string;
  readonly counts: FilteredCounts;
  readonly figure: Figure | undefined;
  readonly page: PageOfPoints;
}

export const ROWS = 25;

/** What a view holds: counts, figure, table, downloads. While a run moves, a signal from its live updates asks for
 *  this part again. */
export function resultsSection(parts: ResultParts): Safe {
  const { run, view } = parts;
  return html`<section
    id="results"
    class="results"
    aria-label="Points of this view"
    hx-get="/runs/${run.id}${viewQuery(view)}"
    hx-trigger="sse:stale, sse:done"
    hx-select="#results"
    hx-select-oob="#cut-flow"
    hx-swap="outerHTML"
    hx-disinherit="*"
  >
    ${countsLine(parts)} ${figurePart(parts)} ${tablePart(parts)}
  </section>`;
}

/** What belongs under a figure: which run, which points, how many. Used on the page and in the downloaded file. */
export function captionLines({ run, where, counts, figure }: Omit<ResultParts, 'page' | 'view'>): string[] {
  return [
    `${figure?.summary ?? ''} ${figure?.remark ?? ''}.`,
    `Trigpoint run ${run.id}, “${run.title}”; ${run.digest ? `digest ${run.digest}` : `${run.state}, no digest yet`}.`,
    `${where === '' ? 'All points' : `Points where ${where}`}: ${countText(counts.points)} of ${countText(counts.total)}, ` +
      `of them ${verdicts(counts)}.`,
  ];
}

function countsLine({ run, view, where, counts }: ResultParts): Safe {
  const ended = run.state === 'complete' || run.state === 'incomplete';
  const whole = ended ? 'of the run' : 'of those computed so far';
  const mistaken = where === '' && (view.where !== '' || view.only.length > 0 || view.ranges.length > 0);
  return html`<div class="sheet counts">
    <p class="count">
      <strong>${countText(counts.points)}</strong> of ${countText(counts.total)} points
      ${counts.total > 0 && html`<span class="under">${percentText(counts.points, counts.total)} ${whole}</span>`}
    </p>
    <p>${verdicts(counts)}</p>
    ${where !== '' && html`<p class="filter">Filter: <code>${where}</code></p>`}
    ${mistaken && html`<p class="filter">The filter has a mistake, said beside its field, and is not applied.</p>`}
  </div>`;
}

function verdicts(counts: FilteredCounts): string {
  const parts = [`${countText(counts.surviving)} surviving`, `${countText(counts.excluded)} excluded`];
  if (counts.failed > 0) parts.push(`${countText(counts.failed)} failed`);
  if (counts.unfinished > 0) parts.push(`${countText(counts.unfinished)} unfinished`);
  return parts.join(', ');
}

function figurePart(parts: ResultParts): Part {
  const { run, view, figure, counts } = parts;
  if (!figure) {
    return html`<div class="sheet note">
      <p>${emptiness(counts)}</p>
    </div>`;
  }
  const [, , how] = captionLines(parts);
  const setting = { summary: figure.summary, notes: [], place: 'page' } as const;
  return html`<figure class="sheet">
    <div class="wide-only">${raw(figure.draw({ ...setting, size: WIDE }))}</div>
    <div class="narrow-only">${raw(figure.draw({ ...setting, size: NARROW }))}</div>
    <figcaption>
      <p>${figure.caption} ${figure.remark}.</p>
      ${figure.cautions.map((caution) => html`<p>Caution: ${proseHtml(caution)}.</p>`)}
      <p>
        Run ${run.id},
        “${run.title}”${
          run.digest
            ? html`; digest <code title="${run.digest}">${digestShort(run.digest)}</code>`
            : html`; no digest yet`
        }.
        ${how}
      </p>
      <p class="actions">
        <a href="/runs/${run.id}/figure.svg${viewQuery(view, { page: 1 })}" download="run-${run.id}.svg"
          >Download the figure (SVG)</a
        >
      </p>
    </figcaption>
  </figure>`;
}

function emptiness(counts: FilteredCounts): string {
  if (counts.total === 0) return 'No point is stored yet.';
  return counts.points === 0
    ? 'No point passes this filter.'
    : 'None of these points has a value on both axes, so there is nothing to draw.';
}

function tablePart({ run, view, where, page, counts }: ResultParts): Part {
  if (counts.points === 0) return '';
  const filter = new URLSearchParams({ where }).toString();
  return html`<section class="sheet" aria-labelledby="points-title">
    <h2 id="points-title">Points</h2>
    ${pointsTable(run.id, page)} ${pager(run, view, counts)}
    <p class="actions">
      <a href="/runs/${run.id}/points.csv?${filter}" download="run-${run.id}.csv"
        >Download these ${countText(counts.points)} points with all columns (CSV)</a
      >
      <a href="/runs/${run.id}/points.csv-metadata.json?${filter}" download="run-${run.id}.csv-metadata.json"
        >what the columns are (JSON)</a
      >
    </p>
  </section>`;
}

function pager(run: RunRecord, view: RunView, counts: FilteredCounts): Part {
  const last = Math.max(1, Math.ceil(counts.points / ROWS));
  const current = Math.min(view.page, last);
  const link = (page: number, title: string, id: string): Part =>
    page >= 1 && page <= last && page !== current
      ? html`<a id="page-${id}" href="/runs/${run.id}${viewQuery(view, { page })}#points-title">${title}</a>`
      : html`<span aria-disabled="true">${title}</span>`;
  return html`<nav class="pager" aria-label="Pages of points">
    ${link(1, 'First', 'first')} ${link(current - 1, 'Previous', 'previous')}
    <span aria-current="page">Page ${countText(current)} of ${countText(last)}</span>
    ${link(current + 1, 'Next', 'next')} ${link(last, 'Last', 'last')}
  </nav>`;
}
