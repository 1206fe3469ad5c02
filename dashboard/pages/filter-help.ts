import type { ColumnRecord } from '../../orchestrator/store/records.js';
import { isClass } from '../columns.js';
import { html, type Safe } from '../html.js';

/** The filter language in a minute, with names of this very run. */
export function filterHelp(columns: readonly ColumnRecord[]): Safe {
  return html`<details class="help">
    <summary>How to write a condition</summary>
    <dl>
      ${examples(columns).map(
        ([example, meaning]) =>
          html`<dt><code>${example}</code></dt>
            <dd>${meaning}</dd>`,
      )}
    </dl>
    <p>
      Numbers are in the unit of the column. An absent value never passes a comparison. Functions: sqrt, exp,
      log, log10, abs, min, max; powers with <code>^</code>.
    </p>
  </details>`;
}

function examples(columns: readonly ColumnRecord[]): [string, string][] {
  const input = columns.find((column) => column.kind === 'input')?.name;
  const quantity = columns.find((column) => column.kind === 'quantity' && !isClass(column))?.name;
  const named = columns.find((column) => column.kind === 'quantity' && isClass(column));
  const constraint = columns.find((column) => column.kind === 'margin')?.constraint;
  const found: [string, string][] = [['surviving', 'also: excluded, failed, unfinished']];
  if (constraint) {
    found.push([`met(${constraint})`, 'also: violated(…)']);
    found.push([`margin(${constraint}) > 0.1`, 'how far from its edge']);
  }
  if (input) found.push([`1 < ${input} < 200`, 'a range, ends left out']);
  if (quantity) found.push([`abs(${quantity}) >= 0.01 and not failed`, 'and, or, not']);
  if (named)
    found.push([`${named.name} == 0`, (named.labels ?? []).map((label, i) => `${i}: ${label}`).join(', ')]);
  return found;
}
