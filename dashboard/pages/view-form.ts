import type { ColumnRecord } from '../../orchestrator/store/records.js';
import { columnTitle, grouped } from '../columns.js';
import { html, type Part, type Safe } from '../html.js';
import type { ConditionGroup } from '../conditions.js';
import { DRAWINGS, SCALES, type FieldMistake, type RunView } from '../view.js';
import { filterHelp } from './filter-help.js';

export interface FormParts {
  readonly run: number;
  readonly view: RunView;
  readonly columns: readonly ColumnRecord[];
  readonly conditions: readonly ConditionGroup[];
  readonly mistakes: readonly FieldMistake[];
}

/** The one form of a run page. It is sent by GET, so that the address says all that is shown. */
export function viewForm(parts: FormParts): Safe {
  return html`<form
    class="sheet view-form"
    method="get"
    action="/runs/${parts.run}#results"
    aria-label="What to show"
  >
    ${said(parts.mistakes, 'address')}
    <fieldset>
      <legend>Which points</legend>
      ${onlyFields(parts)} ${rangeFields(parts)} ${whereField(parts)}
    </fieldset>
    <fieldset>
      <legend>Figure</legend>
      ${axisFields(parts, 'x', 'Across')} ${axisFields(parts, 'y', 'Up')} ${colourFields(parts)}
    </fieldset>
    ${tableFields(parts)}
    <p class="actions">
      <button type="submit">Show</button> <a href="/runs/${parts.run}#results">Start afresh</a>
    </p>
  </form>`;
}

function onlyFields({ view, conditions, mistakes }: FormParts): Safe {
  const rows = [...view.only, ''];
  return html`<div class="field">
    ${rows.map(
      (chosen, index) =>
        html`<label for="only-${index}">${index === 0 ? 'Only points that are' : 'and that are'}</label>
          <select id="only-${index}" name="only" ${invalid(mistakes, 'only')}>
            <option value="">${index === 0 ? 'anything' : 'anything more'}</option>
            ${conditions.map(
              (group) =>
                html`<optgroup label="${group.title}">
                  ${group.conditions.map((condition) => option(condition.expression, condition.title, chosen))}
                </optgroup>`,
            )}
          </select>`,
    )}
    ${said(mistakes, 'only')}
  </div>`;
}

function rangeFields({ view, columns, mistakes }: FormParts): Safe {
  const rows = [...view.ranges, { quantity: '', from: '', to: '' }];
  return html`<div class="field">
    ${rows.map(
      (range, index) =>
        html`<div class="range" role="group" aria-label="Range ${index + 1}">
          <label for="from-${index}" class="unseen">At least</label>
          <input
            id="from-${index}"
            name="from"
            value="${range.from}"
            placeholder="from"
            inputmode="decimal"
          />
          <span aria-hidden="true">≤</span>
          <label for="quantity-${index}" class="unseen">Quantity</label>
          <select id="quantity-${index}" name="quantity" ${invalid(mistakes, 'ranges')}>
            <option value="">a quantity</option>
            ${columnOptions(columns, range.quantity)}
          </select>
          <span aria-hidden="true">≤</span>
          <label for="to-${index}" class="unseen">At most</label>
          <input id="to-${index}" name="to" value="${range.to}" placeholder="to" inputmode="decimal" />
        </div>`,
    )}
    ${said(mistakes, 'ranges')}
  </div>`;
}

function whereField({ view, columns, mistakes }: FormParts): Safe {
  return html`<div class="field">
    <label for="where">and where</label>
    <input
      id="where"
      name="where"
      class="code"
      value="${view.where}"
      placeholder="any condition, e.g. Mt &lt; 172 or met(vacuum-stability)"
      spellcheck="false"
      autocapitalize="none"
      autocomplete="off"
      ${invalid(mistakes, 'where')}
    />
    ${said(mistakes, 'where', view.where)} ${filterHelp(columns)}
  </div>`;
}

function axisFields({ view, columns, mistakes }: FormParts, field: 'x' | 'y', title: string): Safe {
  const scale = `${field}Scale` as const;
  const range = `${field}Range` as const;
  const [from, to] = view[range];
  return html`<div class="field pair">
    <div>
      <label for="${field}">${title}</label>
      <select id="${field}" name="${field}" ${invalid(mistakes, field)}>
        ${columnOptions(columns, view[field])}
      </select>
    </div>
    <div>
      <label for="${scale}">Scale</label>
      <select id="${scale}" name="${scale}" ${invalid(mistakes, scale)}>
        ${SCALES.map((one) => option(one, one === 'auto' ? 'as usual' : one, view[scale]))}
      </select>
    </div>
    <div class="ends">
      <label for="${field}From">from</label>
      <input
        id="${field}From"
        name="${field}From"
        value="${from}"
        inputmode="decimal"
        ${invalid(mistakes, range)}
      />
      <label for="${field}To">to</label>
      <input
        id="${field}To"
        name="${field}To"
        value="${to}"
        inputmode="decimal"
        ${invalid(mistakes, range)}
      />
    </div>
    ${said(mistakes, field)} ${said(mistakes, scale)} ${said(mistakes, range)}
  </div>`;
}

function colourFields({ view, columns, mistakes }: FormParts): Safe {
  return html`<div class="field pair">
    <div>
      <label for="colour">Colour</label>
      <select id="colour" name="colour" ${invalid(mistakes, 'colour')}>
        ${option('', 'how many points there are', view.colour)} ${columnOptions(columns, view.colour)}
      </select>
    </div>
    <div>
      <label for="drawing">Drawn as</label>
      <select id="drawing" name="drawing" ${invalid(mistakes, 'drawing')}>
        ${DRAWINGS.map((one) => option(one, one === 'auto' ? 'fits best' : one, view.drawing))}
      </select>
    </div>
    ${said(mistakes, 'colour')} ${said(mistakes, 'drawing')}
  </div>`;
}

function tableFields({ view, columns, mistakes }: FormParts): Safe {
  return html`<details class="field">
    <summary>Columns of the table (${view.columns.length})</summary>
    ${said(mistakes, 'columns')}
    ${grouped(columns).map(
      (group) =>
        html`<fieldset class="columns">
          <legend>${group.title}</legend>
          ${group.columns.map(
            (column) =>
              html`<label title="${columnTitle(column)}"
                ><input
                  type="checkbox"
                  name="column"
                  value="${column.name}"
                  ${view.columns.includes(column.name) && html`checked`}
                />
                ${column.name}</label
              >`,
          )}
        </fieldset>`,
    )}
  </details>`;
}

function columnOptions(columns: readonly ColumnRecord[], chosen: string): Part {
  return grouped(columns).map(
    (group) =>
      html`<optgroup label="${group.title}">
        ${group.columns.map((column) => option(column.name, columnTitle(column), chosen))}
      </optgroup>`,
  );
}

function option(value: string, title: string, chosen: string): Safe {
  return html`<option value="${value}" ${value === chosen && html`selected`}>${title}</option>`;
}

function invalid(mistakes: readonly FieldMistake[], field: keyof RunView): Part {
  return (
    mistakes.some((mistake) => mistake.field === field) &&
    html`aria-invalid="true" aria-describedby="mistake-${field}"`
  );
}

/** What is wrong with a field, beside it: expected, found, and for a text the place. */
function said(mistakes: readonly FieldMistake[], field: FieldMistake['field'], text = ''): Part {
  const own = mistakes.filter((mistake) => mistake.field === field);
  return (
    own.length > 0 &&
    html`<div class="mistake" id="mistake-${field}" role="alert">
      ${own.map(
        (mistake) =>
          html`<p>
            Expected ${mistake.expected}, found ${mistake.found}${mistake.hint && html` (${mistake.hint})`}.
            ${mistake.position !== undefined && pointedAt(text, mistake.position)}
          </p>`,
      )}
    </div>`
  );
}

function pointedAt(text: string, position: number): Safe {
  const word = /^[A-Za-z0-9_.]+|^[^]/.exec(text.slice(position))?.[0] ?? '';
  const before = text.slice(Math.max(0, position - 60), position);
  const after = text.slice(position + word.length, position + word.length + 40);
  return html`<code class="pointed">${before}<mark>${word || 'here'}</mark>${after}</code>`;
}
