import type { PointFacts } from '../../orchestrator/commands/commands.js';
import type { ConstraintRecord } from '../../orchestrator/store/records.js';
import type { Catalogue, ConstraintInfo } from '../commands.js';
import { html, type Part, type Safe } from '../html.js';
import { valueHtml } from '../numbers.js';
import { proseHtml } from '../prose.js';
import { symbolHtml } from '../symbols.js';
import { sourceHtml } from './source.js';

type ConstraintFacts = PointFacts['constraints'][string];

/** Every constraint of the run with what it says of this point, and what it rests on. */
export function constraintCards(
  facts: PointFacts,
  constraints: readonly ConstraintRecord[],
  catalogue: Catalogue | undefined,
): Part {
  return constraints.map((constraint) => {
    const own = facts.constraints[constraint.name];
    const info = catalogue?.constraints.find((one) => one.name === constraint.name);
    return own && card(constraint, own, info);
  });
}

function card(constraint: ConstraintRecord, own: ConstraintFacts, info: ConstraintInfo | undefined): Safe {
  return html`<article class="constraint outcome-${own.outcome}" id="constraint-${constraint.name}">
    <h3>${info?.title ?? constraint.name} <span class="outcome">${own.outcome.replace('-', ' ')}</span></h3>
    <p class="detail">${proseHtml(own.detail)}</p>
    <dl class="gauges">
      <div class="gauge">
        <dt>Margin</dt>
        <dd>${valueHtml(own.margin, 4)}<span class="under">${info && proseHtml(info.marginScale)}</span></dd>
      </div>
      ${
        own.logLikelihood !== null &&
        html`<div class="gauge">
          <dt>Log-likelihood</dt>
          <dd>${valueHtml(own.logLikelihood, 4)}</dd>
        </div>`
      }
      <div class="gauge">
        <dt>Role</dt>
        <dd class="word">${own.deciding ? 'decides' : 'noted only'}</dd>
      </div>
    </dl>
    ${info && background(constraint, info)}
  </article>`;
}

function background(constraint: ConstraintRecord, info: ConstraintInfo): Safe {
  const options = Object.entries(constraint.options).map(([name, value]) => `${name}: ${value}`);
  return html`<details>
    <summary>What it asks, where it holds, what it neglects</summary>
    <dl class="facts">
      <div>
        <dt>Condition</dt>
        <dd>${symbolHtml(info.formula)}</dd>
      </div>
      ${
        options.length > 0 &&
        html`<div>
          <dt>Options of this run</dt>
          <dd>${options.join(', ')}</dd>
        </div>`
      }
      <div>
        <dt>Reads</dt>
        <dd>${info.needs.map((name, i) => html`${i > 0 && ', '}<code>${name}</code>`)}</dd>
      </div>
      <div>
        <dt>Holds</dt>
        <dd>${proseHtml(info.validity)}</dd>
      </div>
      <div>
        <dt>Neglects</dt>
        <dd>${proseHtml(info.neglects)}</dd>
      </div>
      <div>
        <dt>Sources</dt>
        <dd>
          <ul>
            ${info.sources.map((source) => html`<li>${sourceHtml(source)}</li>`)}
          </ul>
        </dd>
      </div>
    </dl>
  </details>`;
}
