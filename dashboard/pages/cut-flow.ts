import type { Catalogue } from '../commands.js';
import type { CutFlow } from '../../orchestrator/store/reading.js';
import { html, type Safe } from '../html.js';
import { countText } from '../numbers.js';
import { percentText } from '../share.js';
import { shareBar } from './verdict-bar.js';

/** What each constraint takes away, in the order of the plan. */
export function cutFlowSection(flow: CutFlow, catalogue: Catalogue | undefined): Safe {
  const title = (name: string): string =>
    catalogue?.constraints.find((one) => one.name === name)?.title ?? name;
  const start = flow.points - flow.failed - flow.unfinished;
  return html`<section id="cut-flow" class="sheet" aria-labelledby="cut-flow-title">
    <h2 id="cut-flow-title">Cut-flow</h2>
    <div class="scroll" role="region" aria-label="Cut-flow table" tabindex="0">
      <table class="cut-flow">
        <caption>
          “Left” counts the points that this and all earlier deciding constraints leave; “alone” those that
          only this constraint excludes.
        </caption>
        <thead>
          <tr>
            <th scope="col">Constraint</th>
            <th scope="col" class="number">Violated</th>
            <th scope="col" class="number">Alone</th>
            <th scope="col" class="number">Not applicable</th>
            <th scope="col" class="number">Left</th>
            <th scope="col"><span class="unseen">Share left</span></th>
          </tr>
        </thead>
        <tbody>
          <tr>
            <th scope="row">Points that could be judged<span class="under">${lost(flow)}</span></th>
            <td class="number">–</td>
            <td class="number">–</td>
            <td class="number">–</td>
            <td class="number">${countText(start)}</td>
            <td class="with-bar">${percentText(start, flow.points)} ${shareBar(start, flow.points)}</td>
          </tr>
          ${flow.rows.map(
            (row) =>
              html`<tr class="${!row.deciding && 'noted'}">
                <th scope="row">
                  ${title(row.constraint)}<span class="under"
                    ><code>${row.constraint}</code>${!row.deciding && ' · noted, does not decide'}</span
                  >
                </th>
                <td class="number">${countText(row.violated)}</td>
                <td class="number">${row.deciding ? countText(row.alone) : '–'}</td>
                <td class="number">${countText(row.notApplicable)}</td>
                <td class="number">${row.deciding ? countText(row.remaining) : '–'}</td>
                <td class="with-bar">
                  ${
                    row.deciding &&
                    html`${percentText(row.remaining, flow.points)} ${shareBar(row.remaining, flow.points)}`
                  }
                </td>
              </tr>`,
          )}
        </tbody>
      </table>
    </div>
  </section>`;
}

function lost(flow: CutFlow): string {
  const parts = [`of ${countText(flow.points)}`];
  if (flow.failed > 0) parts.push(`${countText(flow.failed)} failed`);
  if (flow.unfinished > 0) parts.push(`${countText(flow.unfinished)} unfinished`);
  return parts.join(', ');
}
