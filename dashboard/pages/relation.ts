import type { RunRecord } from '../../orchestrator/store/records.js';
import { html, type Safe } from '../html.js';

/** How a run came from another one, with a link to it. */
export function relationHtml(run: RunRecord): Safe {
  if (run.parent === null) return html`launched`;
  const parent = html`<a href="/runs/${run.parent}">run ${run.parent}</a>`;
  switch (run.relation) {
    case 'rerun':
      return html`rerun of ${parent}`;
    case 'extend':
      return html`extends ${parent}`;
    case 'rejudge':
      return html`judges ${parent} again`;
    case 'launch':
      return html`launched after ${parent}`;
  }
}
