import { html } from '../html.js';
import { layout } from './layout.js';

export interface TroublePage {
  readonly status: number;
  readonly title: string;
  readonly explanation: string;
}

/** What happened, whether anything was lost, and where to go. */
export function troublePage({ status, title, explanation }: TroublePage): string {
  return layout({
    title,
    trail: [{ title: 'Runs', address: '/' }],
    main: html`<section class="sheet narrow">
      <p class="eyebrow">${status}</p>
      <h1>${title}</h1>
      <p>${explanation}</p>
      <p>Nothing was changed: the dashboard only reads. <a href="/">Back to the runs</a></p>
    </section>`,
  });
}
