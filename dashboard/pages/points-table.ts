import type { PageOfPoints } from '../../orchestrator/store/reading.js';
import type { ColumnRecord } from '../../orchestrator/store/records.js';
import { classColours, isClass } from '../columns.js';
import { html, type Safe } from '../html.js';
import { valueHtml } from '../numbers.js';
import { symbolHtml, unitHtml } from '../symbols.js';

/** Points row by row, each a link to its own page. */
export function pointsTable(run: number, page: PageOfPoints): Safe {
  return html`<div class="scroll" role="region" aria-label="Table of points" tabindex="0">
    <table class="points">
      <thead>
        <tr>
          <th scope="col">Stratum · index</th>
          ${page.columns.map(
            (column) =>
              html`<th scope="col" class="${!isClass(column) && 'number'}" title="${column.meaning}">
                ${symbolHtml(column.symbol)}<span class="under">${columnNote(column)}</span>
              </th>`,
          )}
        </tr>
      </thead>
      <tbody>
        ${page.rows.map(
          (row) =>
            html`<tr>
              <th scope="row">
                <a
                  id="point-${row.stratum}-${row.index}"
                  href="/runs/${run}/points/${row.stratum}/${row.index}"
                  >${row.stratum} · ${row.index}</a
                >
              </th>
              ${page.columns.map((column, i) => cell(column, row.values[i]))}
            </tr>`,
        )}
      </tbody>
    </table>
  </div>`;
}

function columnNote(column: ColumnRecord): Safe {
  const unit = unitHtml(column.unit);
  return html`${column.constraint ?? column.name}${unit.text !== '' && html`, ${unit}`}`;
}

function cell(column: ColumnRecord, value: number): Safe {
  if (!isClass(column)) return html`<td class="number">${valueHtml(value)}</td>`;
  return html`<td>${classHtml(column, value)}</td>`;
}

/** A class by its colour and its name. */
export function classHtml(column: ColumnRecord, value: number): Safe {
  const label = column.labels?.[value];
  if (label === undefined) return valueHtml(value);
  if (column.name === 'failure' && value === 0) return html`–`;
  const colour = classColours(column)[value] ?? 0;
  return html`<span class="class"
    ><svg class="swatch" viewBox="0 0 10 10" aria-hidden="true">
      <rect class="fill-${colour % 7}" width="10" height="10" /></svg
    >${label}</span
  >`;
}
