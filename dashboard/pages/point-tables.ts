import type { PointFacts } from '../../orchestrator/commands/commands.js';
import type { ColumnRecord, RunRecord } from '../../orchestrator/store/records.js';
import type { Catalogue, InputInfo, QuantityInfo, StoredPoint } from '../commands.js';
import { html, type Part, type Safe } from '../html.js';
import { valueHtml } from '../numbers.js';
import { proseHtml } from '../prose.js';
import { symbolHtml, unitHtml } from '../symbols.js';
import { variedInputs } from '../usual-view.js';
import { classHtml } from './points-table.js';
import { sourceHtml } from './source.js';

/** All inputs with all their digits, the varied ones first. */
export function inputTable(
  facts: PointFacts,
  catalogue: Catalogue | undefined,
  run: RunRecord,
  stratum: number,
): Safe {
  const varied = new Set(variedInputs(run, stratum));
  const names = Object.keys(facts.inputs);
  const ordered = [...names.filter((name) => varied.has(name)), ...names.filter((name) => !varied.has(name))];
  return table(
    'Inputs',
    ['Input', 'Value', 'Unit', 'How', 'Usual value'],
    [1],
    [
      ...ordered.map((name) => {
        const input = catalogue?.inputs.find((one) => one.name === name);
        const { value, unit } = facts.inputs[name];
        return html`<tr>
          ${nameCell(name, input)}
          <td class="number">${valueHtml(value, 'all')}</td>
          <td>${unitHtml(unit)}</td>
          <td>${varied.has(name) ? 'varied' : 'fixed'}</td>
          <td>${input && usualValue(input)}</td>
        </tr>`;
      }),
    ],
  );
}

function usualValue(input: InputInfo): Safe {
  return html`${valueHtml(input.default, 'all')}${
      input.uncertainty !== null && html` ± ${valueHtml(input.uncertainty)}`
    }<span class="under">${sourceHtml(input.source)}</span>`;
}

/** Couplings at the scales that the command line prints too. */
export function couplingTable({ facts, trace }: StoredPoint): Safe {
  const names = Object.keys(facts.couplings[0]?.values ?? {});
  return html`<div class="scroll" role="region" aria-label="Table of couplings" tabindex="0">
    <table>
      <thead>
        <tr>
          <th scope="col">Coupling</th>
          ${facts.couplings.map(
            ({ scale, at }) =>
              html`<th scope="col" class="number">
                ${at}<span class="under">${valueHtml(scale.value)} ${unitHtml(scale.unit)}</span>
              </th>`,
          )}
        </tr>
      </thead>
      <tbody>
        ${names.map((name) => {
          const coupling = trace.couplings.find((one) => one.name === name);
          return html`<tr>
            ${nameCell(name, coupling)}
            ${facts.couplings.map(({ values }) => html`<td class="number">${valueHtml(values[name])}</td>`)}
          </tr>`;
        })}
      </tbody>
    </table>
  </div>`;
}

/** Quantities module by module, each caution beside its number. */
export function quantityTables(facts: PointFacts, catalogue: Catalogue | undefined): Part {
  const known = new Set(catalogue?.modules.flatMap((module) => module.gives.map((one) => one.name)));
  const others = Object.keys(facts.quantities).filter((name) => !known.has(name));
  const groups = [
    ...(catalogue?.modules ?? []).map((module) => ({
      title: module.name,
      names: module.gives.map((one) => one.name),
    })),
    { title: catalogue ? 'definitions' : 'all', names: others },
  ];
  const info = new Map(
    catalogue?.modules.flatMap((module) => module.gives.map((one) => [one.name, one] as const)),
  );
  return groups
    .map((group) => ({ ...group, names: group.names.filter((name) => name in facts.quantities) }))
    .filter((group) => group.names.length > 0)
    .map(
      (group) =>
        html`<h3>${group.title.replaceAll('-', ' ')}</h3>
          ${table(
            group.title,
            ['Quantity', 'Value', 'Unit', 'Notes'],
            [1],
            group.names.map((name) => quantityRow(name, facts, info.get(name))),
          )}`,
    );
}

function quantityRow(name: string, facts: PointFacts, info: QuantityInfo | undefined): Safe {
  const { value, unit, label, absent, caution } = facts.quantities[name];
  const notes = [value === null && (absent ?? info?.absent), caution ?? info?.caution].filter(
    (note) => !!note,
  );
  return html`<tr>
    ${nameCell(name, info)}
    <td class="number">${label ?? valueHtml(value, 8)}</td>
    <td>${unitHtml(unit)}</td>
    <td class="notes">${notes.map((note) => html`<p>${proseHtml(String(note))}</p>`)}</td>
  </tr>`;
}

/** What is stored of a point that is not evaluated again. */
export function storedTable(columns: readonly ColumnRecord[], stored: ReadonlyMap<string, number>): Safe {
  const rows = columns.filter((column) => stored.has(column.name));
  return html`<section class="sheet" aria-labelledby="stored-title">
    <h2 id="stored-title">What is stored</h2>
    ${table(
      'Stored',
      ['Column', 'Value', 'Unit'],
      [1],
      rows.map(
        (column) =>
          html`<tr>
            ${nameCell(column.name, column)}
            <td class="number">${classHtml(column, stored.get(column.name) ?? NaN)}</td>
            <td>${unitHtml(column.unit)}</td>
          </tr>`,
      ),
    )}
  </section>`;
}

function nameCell(name: string, info: { symbol: string; meaning: string } | undefined): Safe {
  return html`<th scope="row">
    ${info && symbolHtml(info.symbol)}
    <code>${name}</code>${info && html`<span class="under">${info.meaning}</span>`}
  </th>`;
}

function table(
  name: string,
  heads: readonly string[],
  numbers: readonly number[],
  rows: readonly Safe[],
): Safe {
  return html`<div class="scroll" role="region" aria-label="Table: ${name}" tabindex="0">
    <table>
      <thead>
        <tr>
          ${heads.map((head, i) => html`<th scope="col" class="${numbers.includes(i) && 'number'}">${head}</th>`)}
        </tr>
      </thead>
      <tbody>
        ${rows}
      </tbody>
    </table>
  </div>`;
}
